"""What each grade would do, before it is chosen."""

from collections.abc import Mapping
from dataclasses import dataclass, replace

from roughness import additive, hydraulics
from roughness.assessment.resolving import Resolved, resolve_one
from roughness.desk.places import OF_THE_WHOLE_PART, Place, Question
from roughness.errors import InputError
from roughness.handbook import Candidates, Grade, candidates
from roughness.quantities.ranges import Range, point
from roughness.survey.choices import CHOICES, BaseChoice, Choice
from roughness.survey.words import FACTORS, MULTIPLIER, Factor

Ranges = Mapping[str | None, Mapping[Factor, Range]]
_CM = 100.0


@dataclass(frozen=True, kw_only=True)
class Offer:
    """One grade of the table with its consequence."""

    grade: Grade
    range: Range | None
    """As it would be taken; None where the table alone gives no value (sand of unknown size)."""
    n: Range | None
    """n with this grade, the other factors as they stand (open ones add nothing)."""
    water_cm: float | None
    """Change of the water level against what stands, for a wide channel at the same
    discharge; None where the depth is not known."""
    suggested: bool
    """Whether the measured criterion leaves this grade."""


@dataclass(frozen=True, kw_only=True)
class Offers:
    """All grades of one factor here."""

    grades: tuple[Offer, ...]
    measured: Candidates
    """What the measured criterion says, and near which class edge it lies."""


def standing_ranges(place: Place) -> dict[str | None, dict[Factor, Range]]:
    """Return what stands as ranges, by zone and factor; open factors are left out."""
    found: dict[str | None, dict[Factor, Range]] = {}
    for zone in place.zones:
        for factor in FACTORS:
            resolved = resolved_at(place, (zone, factor))
            if resolved is not None:
                found.setdefault(zone, {})[factor] = resolved.range
    return found


def resolved_at(place: Place, question: Question) -> Resolved | None:
    """Return what stands for a question beside its table; None while it is open.

    What no longer fits the handbook counts as open here; the estimate says what is wrong.
    """
    segment, factor = question
    standing = place.at(segment, factor)
    if standing is None:
        return None
    try:
        return resolve_one(place.handbook, place.part.setting, factor, standing.choice, factor)
    except InputError:
        return None


def n_so_far(place: Place, ranges: Ranges | None = None) -> Range | None:
    """Return n of what was chosen so far, open factors adding nothing; None before the base.

    A segment whose base is still open is left out: without a bed it has no n.
    ``ranges`` stands in for what stands in the place.
    """
    known = standing_ranges(place) if ranges is None else ranges
    begun = [at for at, zone in enumerate(place.zones) if "base" in known.get(zone, {})]
    zones = [_filled(known[place.zones[at]]) for at in begun]
    if len(zones) < 2:
        return additive.envelope(zones[0]) if zones else None
    return additive.envelope_of_segments(
        [_columns(zone) for zone in zones],
        [place.segments[at].perimeter_percent for at in begun],
    )


def _columns(zone: Mapping[Factor, Range]) -> tuple[list[float], list[float], list[float]]:
    six = [zone[factor] for factor in FACTORS]
    return [r.low for r in six], [r.best for r in six], [r.high for r in six]


def _filled(of_zone: Mapping[Factor, Range]) -> dict[Factor, Range]:
    nothing = {f: point(1.0 if f == MULTIPLIER else 0.0) for f in FACTORS}
    return nothing | dict(of_zone)


def offers(place: Place, question: Question, choice: Choice | None = None) -> Offers:
    """Return every grade for a question with what it would do.

    Parameters
    ----------
    place : Place
        Where the question is asked.
    question : (segment or None, factor)
        What is asked.
    choice : Choice, optional
        What is being typed: its criteria suggest a grade and size a sand bed. Its grade and
        numbers do not count. Default: what stands.
    """
    segment, factor = question
    standing = place.at(segment, factor)
    typed = choice or (standing.choice if standing else CHOICES[factor]())
    measured = candidates(
        place.handbook, place.part.setting, factor, typed.criteria(), where=factor
    )
    ranges = standing_ranges(place)
    before = n_so_far(place, ranges)
    return Offers(
        grades=tuple(
            _offer(place, question, typed, grade, measured, (ranges, before))
            for grade in place.handbook.grades(place.part.setting, factor)
        ),
        measured=measured,
    )


def _offer(
    place: Place,
    question: Question,
    typed: Choice,
    grade: Grade,
    measured: Candidates,
    standing: tuple[Ranges, Range | None],
) -> Offer:
    ranges, before = standing
    taken = _range_of(place, question[1], replace(bare(typed), grade=grade.key))
    n = n_with(place, question, taken, ranges) if taken else None
    return Offer(
        grade=grade,
        range=taken,
        n=n,
        water_cm=water_change_cm(place, before, n),
        suggested=grade.key in measured.grades,
    )


def bare(choice: Choice) -> Choice:
    """Return a choice's criteria alone, without grade, numbers and note."""
    return replace(choice, grade=None, low=None, best=None, high=None, note=None)


def _range_of(place: Place, factor: Factor, choice: Choice) -> Range | None:
    if isinstance(choice, BaseChoice) and choice.regime is None:
        choice = replace(choice, regime="unknown")
    try:
        return resolve_one(place.handbook, place.part.setting, factor, choice, factor).range
    except InputError:
        return None


def n_with(
    place: Place, question: Question, taken: Range, ranges: Ranges | None = None
) -> Range | None:
    """Return n so far with ``taken`` as the range of the factor in question."""
    known = standing_ranges(place) if ranges is None else ranges
    segment, factor = question
    zones = place.zones if factor in OF_THE_WHOLE_PART or segment is None else (segment,)
    changed = {zone: dict(known.get(zone, {})) for zone in place.zones}
    for zone in zones:
        changed[zone][factor] = taken
    return n_so_far(place, changed)


def water_change_cm(place: Place, before: Range | None, after: Range | None) -> float | None:
    """Return the change of the water level in cm between two n at the same discharge.

    For a wide channel of the place's mean depth; None where the depth is not known.
    """
    if place.depth_m is None or before is None or after is None or before.best <= 0:
        return None
    change = hydraulics.stage_change_wide(place.depth_m, before.best, after.best)
    return float(change) * _CM
