"""Everything that is written to a survey: one line at a time, checked before it is kept."""

from collections.abc import Mapping, Sequence
from dataclasses import asdict, dataclass
from datetime import date, datetime
from pathlib import Path
from typing import Any

from roughness.assessment.assessing import assess
from roughness.assessment.estimate import Estimate
from roughness.assessment.reading import FILED_UNDER, judgement_from
from roughness.assessment.resolving import resolve_one
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, part_of, place_of
from roughness.desk.whole_files import write_whole
from roughness.errors import InputError, RecordError, UnknownNameError
from roughness.quantities.foreign_text import checked_name, nearest, printable, same_name_key
from roughness.quantities.printing import enumerate_words, show_value
from roughness.quantities.strict_json import read_json
from roughness.shelf.folders import contents
from roughness.shelf.places import tables_folder
from roughness.survey.choices import Choice
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.survey.words import Factor
from roughness.trail.data import CarriedFrom, Gate
from roughness.trail.lines import Line
from roughness.trail.naming import file_name_for, reach_trail
from roughness.trail.reading import Trail, read_trail
from roughness.trail.writing import Kept, append, begin

_LARGEST_N = 10.0


def now() -> str:
    """Return the time as lines carry it: RFC 3339 with offset."""
    return datetime.now().astimezone().isoformat(timespec="milliseconds")


def said(noun: Any) -> dict[str, Any]:
    """Return a dataclass as the data of a line: what is unknown is left out."""
    known: dict[str, Any] = _without_none(asdict(noun))
    return known


def _without_none(value: Any) -> Any:
    if isinstance(value, dict):
        return {key: _without_none(inner) for key, inner in value.items() if inner is not None}
    if isinstance(value, list | tuple):
        return [_without_none(inner) for inner in value]
    return value


@dataclass
class Recorder:
    """Somebody who writes to a survey.

    Each method writes one line and returns when the disk has it. Raises InputError where
    something does not fit, RecordError (busy, broken, not kept) where it was not written.
    """

    survey: SurveyFolder
    by: str
    repaired: int = 0
    """How many torn tails were moved aside so far."""
    unlocked: bool = False
    """Whether the file system turned out to have no locks."""

    # -- the survey ---------------------------------------------------------------------

    def describe(self, **words: Any) -> Line:
        """Say what holds for the whole survey (stream, handbook, length_unit, grows, note)."""
        if key := words.get("handbook"):
            self.survey.handbook_for(key, "channel")
        return self._say_of_survey("describe", words)

    def add_condition(self, condition: FlowCondition) -> Line:
        """Add a flow condition, or replace the one of that name."""
        checked_name(condition.condition, "name of the flow condition")
        if condition.tolerance_cm <= 0:
            raise InputError("the tolerance must be above 0 cm", wanted="30 is usual")
        if condition.discharge_m3s is not None and condition.discharge_m3s <= 0:
            raise InputError("the discharge must be above 0 m3/s", wanted="leave it out if unknown")
        return self._say_of_survey("flow-condition", said(condition))

    def add_reach(self, reach: Reach) -> Line:
        """Begin a reach's trail and note it in the survey's."""
        return self.add_reaches([reach])[0]

    def add_reaches(self, reaches: Sequence[Reach]) -> list[Line]:
        """Begin the trails of several reaches; two lines each, checked before the first."""
        state = self.survey.state
        known = {same_name_key(noted.reach): noted.reach for noted in state.reaches}
        for reach in reaches:
            key = same_name_key(checked_name(reach.reach, "reach name"))
            if key in known:
                raise InputError(
                    f"the survey has the reach {printable(known[key])!r} already",
                    wanted="give another name",
                )
            known[key] = reach.reach
        return [self._add_reach(reach, state.survey) for reach in reaches]

    def _add_reach(self, reach: Reach, survey_id: str) -> Line:
        name = checked_name(reach.reach, "reach name")
        file = file_name_for(name)
        path = reach_trail(self.survey.folder, file)
        path.parent.mkdir(exist_ok=True)
        first = {"format": 1, "survey": survey_id, "reach": name}
        line = self._begun_before(path, first)
        if line is None:
            begun = begin(path, first, by=self.by, at=now(), lock=self.survey.lock)
            self._took(path, begun)
            line = begun.line
        noted = said(reach) | {"reach": name, "file": file, "first_line": line.hash}
        return self._say_of_survey("reach", noted)

    @staticmethod
    def _begun_before(path: Path, first: Mapping[str, Any]) -> Line | None:
        """Return the first line of a reach that was taken back: it goes on with its own trail."""
        trail = read_trail(path) if path.exists() else None
        if trail is None or trail.broken or not trail.lines or trail.lines[0].data != first:
            return None
        return trail.lines[0]

    def note_heads(self, why: str) -> Line | None:
        """Note the last line of every reach's trail, so that a cut before it is seen."""
        heads: dict[str, str] = {}
        for noted in self.survey.state.reaches:
            try:
                trail = self.survey.reach_trail(noted.reach)
            except RecordError:
                continue
            if len(trail.heads) == 1:
                heads[noted.reach] = trail.heads[0]
        noted_before = self.survey.state.heads
        if not heads or (noted_before and noted_before[-1][1].heads == heads):
            return None
        return self._say_of_survey("heads", {"why": why, "heads": heads})

    # -- a reach ------------------------------------------------------------------------

    def describe_reach(self, reach: str, **words: Any) -> Line:
        """Say something of a reach (reach_from, reach_to, slope, note); a later word counts."""
        return self.say_of_reach(reach, "describe", words)

    def add_part(self, reach: str, part: Part) -> Line:
        """Add a part of the cross-section, or replace the one of that name."""
        checked_name(part.part, "name of the part")
        limits = part.part_from, part.part_to
        if limits[0] is not None and limits[1] is not None and limits[0] >= limits[1]:
            raise InputError(
                f"the part goes from {show_value(limits[0])} m to {show_value(limits[1])} m",
                wanted="distances from the left end of the section, the smaller one first",
            )
        return self.say_of_reach(reach, "part", said(part))

    def note_visit(self, reach: str, visit: Visit) -> Line:
        """Note who was there, when and in what state the reach was seen."""
        checked_name(visit.visit, "name of the visit")
        if visit.on is not None:
            _refuse_no_date(visit.on)
        return self.say_of_reach(reach, "visit", said(visit))

    def set_gate(self, reach: str, gate: Gate) -> Line:
        """Record what is asked once per part and condition, before the factors."""
        if gate.depth_m is not None and not 0 < gate.depth_m < 1000:
            raise InputError(
                f"a mean depth of {show_value(gate.depth_m)} m cannot be",
                wanted="metres above 0; leave it out if unknown",
            )
        shares = [segment.perimeter_percent for segment in gate.segments or ()]
        if shares and (min(shares) <= 0 or abs(sum(shares) - 100) > 1 or len(shares) < 2):
            raise InputError(
                f"the shares of the wetted perimeter add to {show_value(sum(shares))} %",
                wanted="two or more shares above 0 that add to 100",
            )
        return self.say_of_reach(reach, "gate", said(gate))

    def choose(
        self,
        place: Place,
        factor: Factor,
        choice: Choice,
        *,
        segment: str | None = None,
        carried_from: CarriedFrom | None = None,
    ) -> Line:
        """Record the choice for one factor of a part under a condition."""
        where = f"{factor} of {printable(place.part.part)}"
        resolve_one(place.handbook, place.part.setting, factor, choice, where)
        data: dict[str, Any] = {
            "part": place.part.part,
            "condition": place.condition.condition,
            "factor": factor,
            "choice": said(choice),
            "handbook": place.asked_handbook,
            "handbook_sha256": place.handbook.sha256,
        }
        if segment is not None:
            data["segment"] = segment
        if carried_from is not None:
            data["carried_from"] = asdict(carried_from)
        self.keep_handbooks(place.asked_handbook, place.handbook.key)
        return self.say_of_reach(place.reach.reach, "choose", data)

    def record(self, reach: str, raw: bytes, where: str) -> tuple[Line, Estimate]:
        """Record a whole estimate from its JSON text, with its part and condition."""
        noted = self.survey.noted_reach(reach)
        document = read_json(raw, where)
        judgement = judgement_from(document, where)
        filed = {key: _filed(document, key, where) for key in FILED_UNDER if key in document}
        for key in ("part", "condition"):
            if key not in filed:
                raise InputError(
                    "it is missing", where=f"{where}: {key}", wanted=f"which {key} is the n for?"
                )
        handbook, _ = self.survey.handbook_for(judgement.handbook, judgement.setting)
        estimate = assess(handbook, judgement, where)
        known = place_of(self.survey, noted.reach, filed["part"], filed["condition"])
        listed = part_of(self.survey.reach_state(noted.reach), filed["part"]) or known.state
        if listed and known.part.setting != judgement.setting:
            raise InputError(
                f"the setting is {judgement.setting}, that of {printable(known.part.part)!r}"
                f" is {known.part.setting}",
                where=f"{where}: setting",
                wanted="both must be the same",
            )
        body = {key: value for key, value in document.items() if key not in FILED_UNDER}
        data = filed | {"handbook_sha256": handbook.sha256, "estimate": body}
        self.keep_handbooks(judgement.handbook, handbook.key)
        return self.say_of_reach(noted.reach, "estimate", data), estimate

    def adopt(
        self,
        reach: str,
        part: str,
        condition: str,
        n: float,
        *,
        low: float | None = None,
        high: float | None = None,
        reason: str,
    ) -> Line:
        """Let another n than the estimate go to the model, with the reason."""
        place = self.known_place(reach, part, condition)
        for name, value in (("n", n), ("low", low), ("high", high)):
            if value is not None and not 0 < value <= _LARGEST_N:
                raise InputError(
                    f"{name} {show_value(value)} is no roughness", wanted="write 0.035, not 35"
                )
        if not (n if low is None else low) <= n <= (n if high is None else high):
            raise InputError("low, n and high are out of order", wanted="low <= n <= high")
        if not reason.strip():
            raise InputError("the reason is empty", wanted="say why the estimate is not taken")
        data = {"part": place.part.part, "condition": place.condition.condition, "n": n}
        data |= _without_none({"low": low, "high": high, "reason": reason.strip()})
        return self.say_of_reach(place.reach.reach, "adopt", data)

    def withdraw(self, reach: str | None, line: Line) -> Line:
        """Take a line back (None: one of the survey's own); it stays in the file."""
        if reach is None:
            return self._say_of_survey("withdraw", {"line": line.hash})
        return self.say_of_reach(reach, "withdraw", {"line": line.hash})

    # -- how it is written ----------------------------------------------------------------

    def known_place(self, reach: str, part: str, condition: str) -> Place:
        """Return a place of which the survey or the reach's trail knows; refuse any other."""
        noted = self.survey.noted_reach(reach)
        state = self.survey.reach_state(noted.reach)
        parts = [p.part for p in state.parts] + [place.part for place in state.places.values()]
        conditions = [c.condition for c in self.survey.state.conditions]
        conditions += [place.condition for place in state.places.values()]
        _refuse_unknown("part", part, parts)
        _refuse_unknown("flow condition", condition, conditions)
        return place_of(self.survey, noted.reach, part, condition)

    def _say_of_survey(self, kind: str, data: Mapping[str, Any]) -> Line:
        return self._say(self.survey.path, self.survey.trail(), kind, data)

    def say_of_reach(
        self, reach: str, kind: str, data: Mapping[str, Any], *, at: str | None = None
    ) -> Line:
        """Write one line of a reach's trail; what it says was checked by who calls.

        ``at`` is given where the line carries a signature that names the time.
        """
        trail = self.survey.reach_trail(reach)
        return self._say(self.survey.reach_path(reach), trail, kind, data, at)

    def _say(
        self,
        path: Path,
        known: Trail,
        kind: str,
        data: Mapping[str, Any],
        at: str | None = None,
    ) -> Line:
        self._refuse_newer()
        lock = self.survey.lock
        kept = append(path, kind, data, by=self.by, at=at or now(), lock=lock, known=known)
        return self._took(path, kept)

    def _refuse_newer(self) -> None:
        """A survey whose own trail a newer version wrote is read-only, its reaches too."""
        if newer := self.survey.trail().newer:
            raise RecordError(f"{newer}; nothing was written")

    def _took(self, path: Path, kept: Kept) -> Line:
        self.survey.kept(path, kept.trail)
        self.repaired += bool(kept.repaired)
        self.unlocked = self.unlocked or not kept.locked
        return kept.line

    def keep_handbooks(self, *keys: str) -> None:
        """Put a copy of each handbook that is used into the survey, once."""
        self._refuse_newer()
        own, shipped = contents(self.survey.handbooks), contents(tables_folder())
        for key in dict.fromkeys(keys):
            if key not in own.files and key in shipped.files:
                source = shipped.files[key]
                self.survey.handbooks.mkdir(exist_ok=True)
                write_whole(self.survey.handbooks / source.name, source.read_bytes())


def _refuse_unknown(what: str, name: str, known: list[str]) -> None:
    by_key = {same_name_key(one): one for one in known}
    if same_name_key(name) not in by_key:
        listed = [printable(one) for one in by_key.values()]
        hint = nearest(name, listed)
        few = f"known are {enumerate_words(listed)}" if listed else "there is none yet"
        raise UnknownNameError(
            f"the reach has no {what} {printable(name)!r}",
            wanted=f"{hint}? {few}" if hint else few,
        )


def _filed(document: Mapping[str, Any], key: str, where: str) -> str:
    name = document[key]
    if not isinstance(name, str):
        raise InputError("a text in quotes is due", where=f"{where}: {key}")
    return checked_name(name, f"name of the {key}", f"{where}: {key}")


def _refuse_no_date(text: str) -> None:
    try:
        date.fromisoformat(text)
    except ValueError:
        raise InputError(
            f"{printable(text)!r} is no date", wanted="write it as 2026-06-30"
        ) from None
