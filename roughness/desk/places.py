"""One part of a reach under one flow condition, as it stands: chosen, inherited, missing.

A second flow condition takes base, irregularity and variation over from the first one that
has them. Where bed and banks are told apart, section variation and meandering are
properties of the whole part and asked once.
"""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import lru_cache

from roughness.assessment.assessing import assess
from roughness.assessment.estimate import Estimate
from roughness.desk.folder import SurveyFolder
from roughness.handbook import Handbook
from roughness.quantities.foreign_text import same_name_key
from roughness.survey.choices import Choice, Factors, Judgement, Measured, Segment
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.survey.words import (
    FACTORS,
    INHERITED,
    MULTIPLIER,
    USUAL_PARTS,
    Factor,
    Setting,
    factors_of,
)
from roughness.trail.data import CarriedFrom, SegmentShare
from roughness.trail.state import Chosen, PartState, ReachState

# Asked once for the part, also where bed and banks are told apart.
OF_THE_WHOLE_PART: tuple[Factor, ...] = ("variation", MULTIPLIER)

Question = tuple[str | None, Factor]
"""Segment (None: the whole part) and factor."""


@dataclass(frozen=True, kw_only=True)
class Standing:
    """The choice that stands for one factor here, and where it comes from."""

    choice: Choice
    by: str
    at: str
    line: str
    """Hash of the line that said so."""
    handbook_sha256: str
    carried_from: CarriedFrom | None = None
    inherited_from: str | None = None
    """The flow condition it was taken over from."""


@dataclass(frozen=True, kw_only=True)
class Place:
    """A part under a flow condition with everything that stands for it."""

    reach: Reach
    part: Part
    condition: FlowCondition
    state: PartState | None
    """None where nothing was said about it yet."""
    asked_handbook: str
    handbook: Handbook
    """The one whose table serves the setting."""
    segments: tuple[SegmentShare, ...] = ()
    standing: Mapping[str | None, Mapping[Factor, Standing]]
    made_by_record: tuple[str, ...] = ()
    """What a `record` made because it was not there: ``part``, ``condition``."""

    @property
    def zones(self) -> tuple[str | None, ...]:
        """The segments' names, or None alone for the whole part."""
        return tuple(s.name for s in self.segments) or (None,)

    @property
    def questions(self) -> tuple[Question, ...]:
        """What is asked here, in the order of publication."""
        return tuple(
            (zone, factor)
            for factor in factors_of(self.part.setting)
            for zone in ((None,) if self._is_asked_once(factor) else self.zones)
        )

    def _is_asked_once(self, factor: Factor) -> bool:
        """Whether one answer serves all segments; a recorded estimate may tell them apart."""
        if factor not in OF_THE_WHOLE_PART:
            return False
        told_apart = any(factor in self.standing.get(zone, {}) for zone in self.zones)
        return factor in self.standing.get(None, {}) or not told_apart

    def at(self, segment: str | None, factor: Factor) -> Standing | None:
        """Return what stands for a factor: the segment's own choice, else the whole part's."""
        own = self.standing.get(segment, {}).get(factor)
        return own or self.standing.get(None, {}).get(factor)

    @property
    def missing(self) -> tuple[Question, ...]:
        """The questions that nobody answered yet."""
        return tuple(q for q in self.questions if self.at(*q) is None)

    @property
    def unconfirmed(self) -> tuple[Factor, ...]:
        """Factors carried over from elsewhere that nobody confirmed here."""
        carried = {
            factor
            for segment, factor in self.questions
            if (standing := self.at(segment, factor)) and standing.carried_from
        }
        return tuple(factor for factor in FACTORS if factor in carried)

    @property
    def depth_m(self) -> float | None:
        """Mean depth in this part at this condition, m."""
        gate = self.state.gate if self.state else None
        return gate.depth_m if gate else None

    @property
    def measured(self) -> Measured:
        """What was measured, with the gate's depth and the reach's slope where it is silent."""
        known = (self.state.measured if self.state else None) or Measured()
        return replace(
            known,
            depth_m=self.depth_m if known.depth_m is None else known.depth_m,
            slope=self.reach.slope if known.slope is None else known.slope,
        )

    def factors(self, segment: str | None) -> Factors:
        """Return what stands for a segment, or the whole part, without origins."""
        known = {
            factor: standing.choice
            for factor in factors_of(self.part.setting)
            if (standing := self.at(segment, factor)) is not None
        }
        return Factors(**known)  # type: ignore[arg-type]

    def judgement(self) -> Judgement:
        """Return everything the estimate rests on, complete or not."""
        whole = None if self.segments else self.factors(None)
        told_apart = tuple(
            Segment(
                name=s.name, perimeter_percent=s.perimeter_percent, factors=self.factors(s.name)
            )
            for s in self.segments
        )
        return Judgement(
            handbook=self.asked_handbook,
            setting=self.part.setting,
            factors=whole,
            segments=told_apart or None,
            measured=self.measured,
            shape=self.state.shape if self.state else "triangular",
            dependence=self.state.dependence if self.state else 0.5,
        )

    def estimate(self) -> Estimate | None:
        """Return the estimate, or None where a factor is missing.

        Raises
        ------
        InputError
            Where what stands in the trail no longer fits the handbook.
        """
        if self.missing:
            return None
        where = f"{self.reach.reach}, {self.part.part}, {self.condition.condition}"
        return _assessed(self.handbook, self.judgement(), where)


@lru_cache(maxsize=8192)
def _assessed(handbook: Handbook, judgement: Judgement, where: str) -> Estimate:
    return assess(handbook, judgement, where)


def place_of(survey: SurveyFolder, reach: str, part: str, condition: str) -> Place:
    """Return a part of a reach under a flow condition; both may be new.

    Raises
    ------
    RoughnessError
        Where the reach or its handbook cannot be read.
    """
    listed = survey.reach(reach)
    return place_in(survey, listed, survey.reach_state(reach), part, condition)


def place_in(
    survey: SurveyFolder, reach: Reach, state: ReachState, part: str, condition: str
) -> Place:
    """Return the same where the reach has been read already."""
    own = state.place(part, condition)
    known_part = part_of(state, part)
    known_condition = survey.state.condition(condition)
    setting = known_part.setting if known_part else _setting(part, own)
    handbook, asked = survey.handbook_for(own.handbook if own else None, setting)
    elsewhere = _other_conditions(survey, state, part, condition)
    return Place(
        reach=reach,
        part=known_part or Part(part=part, setting=setting),
        condition=known_condition or FlowCondition(condition=condition),
        state=own,
        asked_handbook=asked,
        handbook=handbook,
        segments=_segments(own, elsewhere),
        standing=_standing(own, elsewhere),
        made_by_record=tuple(
            what
            for what, known in (("part", known_part), ("condition", known_condition))
            if own is not None and known is None
        ),
    )


def part_of(state: ReachState, name: str) -> Part | None:
    """Return a part of the reach by its name, compared as people would."""
    wanted = same_name_key(name)
    return next((p for p in state.parts if same_name_key(p.part) == wanted), None)


def _setting(part: str, own: PartState | None) -> Setting:
    if own is not None and own.setting is not None:
        return own.setting
    return USUAL_PARTS.get(part, "channel")


def _other_conditions(
    survey: SurveyFolder, state: ReachState, part: str, condition: str
) -> list[PartState]:
    """Return the same part under the other conditions, in the survey's order of conditions."""
    names = [c.condition for c in survey.state.conditions]
    names += [place.condition for place in state.places.values() if place.condition not in names]
    places = [state.place(part, name) for name in names]
    here = state.place(part, condition)
    return [place for place in places if place is not None and place is not here]


def _segments(own: PartState | None, elsewhere: list[PartState]) -> tuple[SegmentShare, ...]:
    if own is not None and (own.gate is not None or own.choices):
        return own.segments or ()
    return next((place.segments for place in elsewhere if place.segments), None) or ()


def _standing(
    own: PartState | None, elsewhere: list[PartState]
) -> dict[str | None, dict[Factor, Standing]]:
    found: dict[str | None, dict[Factor, Standing]] = {}
    for place in reversed(elsewhere):
        for segment, chosen in place.choices.items():
            for factor in INHERITED:
                if factor in chosen:
                    standing = _as_standing(chosen[factor], place.condition)
                    found.setdefault(segment, {})[factor] = standing
    for segment, chosen in (own.choices if own else {}).items():
        for factor, entry in chosen.items():
            found.setdefault(segment, {})[factor] = _as_standing(entry, None)
    return found


def _as_standing(chosen: Chosen, inherited_from: str | None) -> Standing:
    return Standing(
        choice=chosen.choice,
        by=chosen.line.by,
        at=chosen.line.at,
        line=chosen.line.hash,
        handbook_sha256=chosen.handbook_sha256,
        carried_from=chosen.carried_from,
        inherited_from=inherited_from,
    )
