"""What a reviewer does: ask, answer, accept at one head, return. One line of the trail each."""

from collections.abc import Sequence
from dataclasses import asdict, dataclass, fields
from pathlib import Path
from typing import Any

from roughness import __version__
from roughness.custody import Case, Refusal, decide, may_accept
from roughness.custody.status import ACCEPTED
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.recording import Recorder
from roughness.desk.recording import now as moment
from roughness.desk.rows import Row, rows, rows_of_reach
from roughness.desk.signatures import text_to_sign
from roughness.desk.signing import sign
from roughness.desk.verdicts import authors_of, same_basis
from roughness.errors import InputError, RecordError, RoughnessError, UnknownNameError
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.survey.words import Factor
from roughness.trail.lines import Line
from roughness.trail.review_data import AcceptedSpread

_SPREAD = tuple(field.name for field in fields(AcceptedSpread))


@dataclass
class Reviewer:
    """Somebody who reviews a survey.

    Each method writes one line and returns it when the disk has it. Raises InputError where
    something speaks against it, RecordError (busy, broken, not kept) where it was not
    written. ``pen.withdraw`` takes any of these lines back.
    """

    pen: Recorder

    @property
    def survey(self) -> SurveyFolder:
        """The survey that is reviewed."""
        return self.pen.survey

    @property
    def by(self) -> str:
        """Who reviews."""
        return self.pen.by

    # -- questions ------------------------------------------------------------------------

    def ask(
        self,
        place: Place,
        text: str,
        *,
        factor: Factor | None = None,
        segment: str | None = None,
        follows: str | None = None,
    ) -> Line:
        """Ask about a place, or one factor of it; ``follows`` is the hash of a question."""
        data = _of(place) | {"text": _said(text, "question")}
        if follows is not None:
            self._question(place.reach.reach, follows)
        more = {"factor": factor, "segment": segment, "follows": follows}
        return self._say(place, "question", data | _known(more))

    def answer(self, reach: str, question: str, text: str) -> Line:
        """Answer the question with this hash."""
        self._question(reach, question)
        data = {"question": question, "text": _said(text, "answer")}
        return self.pen.say_of_reach(self.survey.noted_reach(reach).reach, "answer", data)

    def answer_finding(self, place: Place, finding: Finding, text: str) -> Line:
        """Answer a finding that stands; the answer lasts while the finding says the same."""
        if finding.level == "stop":
            raise InputError(
                "a finding that stops is not answered",
                wanted="mend what it names, or accept over it with a reason",
            )
        data = _of(place) | {"rule": finding.rule, "says": finding.says}
        data |= {"text": _said(text, "answer")} | _known({"factor": finding.factor})
        return self._say(place, "finding-answered", data)

    def _question(self, reach: str, line_hash: str) -> None:
        reviews = self.survey.reach_state(reach).reviews.values()
        if not any(asked.line.hash == line_hash for one in reviews for asked in one.questions):
            raise UnknownNameError(
                f"{printable(reach)} has no question {printable(line_hash)[:12]}",
                wanted="the hash of a question that was not withdrawn",
            )

    # -- verdicts -------------------------------------------------------------------------

    def refusals(self, row: Row) -> list[Refusal]:
        """Return what speaks against accepting a row, the weightiest first."""
        try:
            case = self.case(row)
        except RoughnessError as error:
            return [Refusal(str(error), False)]
        return may_accept(case, self.by, same_person_may=self._same_person_may)

    def accept(self, row: Row, *, overruling: str | None = None, key: Path | None = None) -> Line:
        """Accept a row as it was seen, and note in the survey's trail that it was.

        Parameters
        ----------
        row : Row
            As the reviewer saw it, with the findings over the survey
            (:func:`roughness.desk.rows.rows`).
        overruling : str, optional
            Why it is accepted although a finding stops it or a question is open.
        key : Path, optional
            The SSH key to sign with (:func:`roughness.desk.identity.signing_key`).

        Raises
        ------
        InputError
            What speaks against it; that the value was changed since ``row`` was read; or that
            it could not be signed.
        RecordError
            Where it was not written; or it was, and the survey's trail did not take the note.
        """
        line = self._accept(row, overruling, key)
        self._note_heads()
        return line

    def clean(self, found: Sequence[Row] | None = None) -> list[Row]:
        """Return the rows that can be accepted in one step: nothing open, nothing against it.

        A list to be shown first; :meth:`accept_all` then takes it.
        """
        listed = rows(self.survey) if found is None else found
        return [
            row
            for row in listed
            if row.status != ACCEPTED
            and all(finding.level == "tell" for finding in row.open)
            and not self.refusals(row)
        ]

    def accept_all(self, listed: Sequence[Row], *, key: Path | None = None) -> list[Line]:
        """Accept each row of a list as it was shown; those before a refusal stay accepted."""
        lines: list[Line] = []
        try:
            for row in listed:
                lines.append(self._accept(row, None, key))
        finally:
            if lines:
                self._note_heads()
        return lines

    def return_(self, place: Place, reason: str) -> Line:
        """Give a place back to the crew with what is to be done."""
        if place.state is None:
            raise InputError("nothing was said about it yet", wanted="ask a question instead")
        return self._say(place, "return", _of(place) | {"reason": _said(reason, "reason")})

    def _accept(self, row: Row, overruling: str | None, key: Path | None) -> Line:
        seen = _place(row)
        fresh = self._fresh(row)
        now = _place(fresh)
        if row.trail_head is None or fresh.trail_head is None:
            raise InputError(f"the trail of {printable(row.reach.reach)} is to be merged first")
        if not (same_basis(seen, now) and seen.condition == now.condition):
            raise InputError(
                f"{_in_words(now)} was changed since it was read", wanted="look at it again"
            )
        decision = decide(
            self.case(fresh),
            self.by,
            same_person_may=self._same_person_may,
            overruling=overruling,
        )
        data = _judged(self.survey, fresh, now) | _known(
            {"overruled": decision.overruled, "same_person": decision.same_person or None}
        )
        at = moment()
        if key is not None:
            data |= self._signature(now.reach.reach, data, at, key)
        return self.pen.say_of_reach(now.reach.reach, "accept", data, at=at)

    def _signature(self, reach: str, data: dict[str, Any], at: str, key: Path) -> dict[str, str]:
        text = text_to_sign(self.survey.reach_trail(reach), data, self.by, at)
        made = sign(text, key)
        return {"signature": made.armoured, "signed_by": made.public_key}

    def _fresh(self, row: Row) -> Row:
        """Return the row as it is now; what its neighbours make of it stops nothing."""
        wanted = _of(_place(row))
        for one in rows_of_reach(self.survey, row.reach.reach, row.order):
            if one.place and _of(one.place) == wanted:
                return one
        raise InputError(f"{_in_words(_place(row))} is not there any more")

    @property
    def _same_person_may(self) -> bool:
        return bool(self.survey.state.described.same_person_may_accept)

    def case(self, row: Row) -> Case:
        """Return what a verdict on a row has before it: stops, open questions, authors, counts."""
        place = _place(row)
        review = row.review
        return Case(
            place=_in_words(place),
            complete=row.estimate is not None,
            stops=tuple(finding.says for finding in row.findings if finding.level == "stop"),
            open_questions=tuple(asked.question.text for asked in review.open_questions),
            unanswered=sum(finding.level == "ask" for finding in row.open),
            estimated_by=authors_of(self.survey, place),
            accepted_by=row.reviewed_by if row.status == ACCEPTED else None,
            trail=self._read_only(row.reach.reach),
        )

    def _read_only(self, reach: str) -> str | None:
        for trail in (self.survey.reach_trail(reach), self.survey.trail()):
            if trail.broken:
                return f"the trail {trail.file} is broken"
            if trail.to_be_merged:
                return f"the trail {trail.file} is to be merged"
            if trail.newer:
                return str(trail.newer)
        return None

    def _note_heads(self) -> None:
        try:
            self.pen.note_heads("acceptance")
        except RecordError as error:
            raise RecordError(
                f"what was accepted is kept, but the survey did not note it ({error})"
            ) from None

    def _say(self, place: Place, kind: str, data: dict[str, Any]) -> Line:
        return self.pen.say_of_reach(place.reach.reach, kind, data)


def _judged(survey: SurveyFolder, row: Row, place: Place) -> dict[str, Any]:
    """Return what is accepted: where, at which head, which n by which table."""
    assert row.estimate is not None, "nothing incomplete comes this far"
    spread = asdict(row.estimate.spread)
    condition = survey.state.condition_lines.get(place.condition.condition)
    return _of(place) | {
        "head": row.trail_head,
        "n": asdict(row.estimate.n),
        "spread": {word: spread[word] for word in _SPREAD},
        "program": __version__,
        "handbook": place.handbook.key,
        "handbook_sha256": place.handbook.sha256,
        "condition_line": condition.hash if condition else None,
    }


def _place(row: Row) -> Place:
    if row.place is None:
        raise InputError(
            f"{printable(row.reach.reach)} has nothing to review yet",
            wanted="a part under a flow condition with choices that fit its handbook",
        )
    return row.place


def _of(place: Place) -> dict[str, Any]:
    return {"part": place.part.part, "condition": place.condition.condition}


def _in_words(place: Place) -> str:
    named = f"{place.part.part} of {place.reach.reach} at {place.condition.condition}"
    return printable(named)


def _said(text: str, what: str) -> str:
    if not text.strip():
        raise InputError(f"the {what} is empty", wanted="say it in a few words")
    return text.strip()


def _known(words: dict[str, Any]) -> dict[str, Any]:
    return {word: value for word, value in words.items() if value is not None}
