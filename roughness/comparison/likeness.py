"""How alike two reaches are, criterion by criterion, with the reason in words.

Each criterion gives a distance from 0 (alike) to 1: sizes, slopes and radii by their ratio (ten
times apart is 1), bed materials by their place in the order of sizes, plants by the share of
kinds that both have. What is known of one reach alone counts as half a distance, what is known
of neither is left out. Likeness is 1 less the weighted mean. Scales and weights are ours:
common practice, no source.
"""

from collections.abc import Callable
from dataclasses import dataclass
from itertools import product
from math import log10
from typing import Final

from roughness.comparison.measured_streams import BEDS, Bed, Plant, bed_of_size
from roughness.quantities.printing import enumerate_words, rounded, show_value
from roughness.survey.words import Growth, Setting

HALF_KNOWN: Final = 0.5
_SAME: Final = 1.25
_MOST_TIMES: Final = 1e6
# Beds that are no step in the order of grain sizes.
_NO_GRAINS: Final = ("firm soil", "bedrock")


@dataclass(frozen=True, kw_only=True)
class ReachFacts:
    """What likeness goes by; what is not known is None, and an empty bed too."""

    setting: Setting
    bed: tuple[Bed, ...] = ()
    d50_mm: float | None = None
    slope: float | None = None
    hydraulic_radius_m: float | None = None
    depth_m: float | None = None
    """Stands for the hydraulic radius where that is not known."""
    plants: tuple[Plant, ...] | None = None
    """Kinds of plants in the flow; none where empty."""
    growth: Growth | None = None


@dataclass(frozen=True, slots=True)
class Compared:
    """One criterion: how far apart, and that in words, seen from the first reach."""

    distance: float
    says: str


@dataclass(frozen=True, kw_only=True)
class Likeness:
    """How alike two reaches of one setting are."""

    value: float
    """0 to 1; 1 where everything that is known is the same."""
    shared: int
    """Criteria known of both."""
    reasons: tuple[str, ...]


def likeness(here: ReachFacts, there: ReachFacts) -> Likeness | None:
    """Return how alike two reaches are.

    Parameters
    ----------
    here, there : ReachFacts
        The number does not depend on their order; the words speak of ``there``.

    Returns
    -------
    Likeness or None
        None where the settings differ or nothing else is known of both.
    """
    if here.setting != there.setting:
        return None
    weighed, shared, reasons = [], 0, []
    for criterion in _CRITERIA:
        a, b = criterion.known(here), criterion.known(there)
        if not (a or b):
            continue
        if not (a and b):
            weighed.append((criterion.weight, HALF_KNOWN))
            reasons.append(f"{criterion.name} not known {'there' if a else 'here'}")
            continue
        compared = criterion.compare(here, there)
        weighed.append((criterion.weight, compared.distance))
        reasons.append(compared.says)
        shared += 1
    if not shared:
        return None
    whole = sum(weight for weight, _ in weighed)
    apart = sum(weight * distance for weight, distance in weighed) / whole
    return Likeness(value=1.0 - apart, shared=shared, reasons=tuple(reasons))


@dataclass(frozen=True, slots=True)
class _Criterion:
    name: str
    weight: float
    known: Callable[[ReachFacts], bool]
    compare: Callable[[ReachFacts, ReachFacts], Compared]


def _bed_known(facts: ReachFacts) -> bool:
    return facts.d50_mm is not None or bool(facts.bed)


def _compare_bed(here: ReachFacts, there: ReachFacts) -> Compared:
    if here.d50_mm is not None and there.d50_mm is not None:
        return _by_ratio("bed", "size", here.d50_mm, there.d50_mm, " mm", ("finer", "coarser"))
    ours, theirs = _materials(here), _materials(there)
    distance = min(_steps(a, b) for a, b in product(ours, theirs))
    if distance == 0:
        both = [bed for bed in theirs if bed in ours]
        return Compared(0.0, f"bed of the same kind ({enumerate_words(both)})")
    return Compared(distance, f"bed of {enumerate_words(theirs)}, here of {enumerate_words(ours)}")


def _materials(facts: ReachFacts) -> tuple[Bed, ...]:
    return facts.bed or ((bed_of_size(facts.d50_mm),) if facts.d50_mm is not None else ())


def _steps(a: Bed, b: Bed) -> float:
    if a == b:
        return 0.0
    if a in _NO_GRAINS or b in _NO_GRAINS:
        return 1.0
    return min(1.0, abs(BEDS.index(a) - BEDS.index(b)) / 2)


def _compare_slope(here: ReachFacts, there: ReachFacts) -> Compared:
    assert here.slope is not None and there.slope is not None
    return _by_ratio("slope", "", here.slope, there.slope, "", ("smaller", "larger"))


def _water(facts: ReachFacts) -> float | None:
    return facts.depth_m if facts.hydraulic_radius_m is None else facts.hydraulic_radius_m


def _compare_water(here: ReachFacts, there: ReachFacts) -> Compared:
    ours, theirs = _water(here), _water(there)
    assert ours is not None and theirs is not None
    both = here.hydraulic_radius_m is not None and there.hydraulic_radius_m is not None
    name = "hydraulic radius" if both else "depth"
    return _by_ratio(name, "", ours, theirs, " m", ("smaller", "larger"))


def _by_ratio(
    name: str, kind: str, here: float, there: float, unit: str, words: tuple[str, str]
) -> Compared:
    distance = min(1.0, abs(log10(there / here)))
    ratio = max(there / here, here / there)
    values = f"({show_value(_short(there))}{unit} there, {show_value(_short(here))}{unit} here)"
    if ratio <= _SAME:
        same = f"{name} of the same {kind}" if kind else f"about the same {name}"
        return Compared(distance, f"{same} {values}")
    times = rounded(ratio, 0 if ratio >= 3 else 1) if ratio < _MOST_TIMES else "over a million"
    return Compared(distance, f"{name} {times} times {words[there > here]} {values}")


def _short(value: float) -> float:
    return float(f"{value:.3g}")


def _compare_plants(here: ReachFacts, there: ReachFacts) -> Compared:
    ours, theirs = set(here.plants or ()), set(there.plants or ())
    distance = 1 - len(ours & theirs) / len(ours | theirs) if ours | theirs else 0.0
    if ours == theirs:
        return Compared(0.0, f"plants alike ({_named(there)})")
    return Compared(distance, f"plants: {_named(there)} there, {_named(here)} here")


def _named(facts: ReachFacts) -> str:
    return enumerate_words(facts.plants or ("none",))


def _compare_growth(here: ReachFacts, there: ReachFacts) -> Compared:
    if here.growth == there.growth:
        return Compared(0.0, f"the same state of growth ({there.growth})")
    return Compared(1.0, f"state of growth {there.growth} there, {here.growth} here")


def _growth_known(facts: ReachFacts) -> bool:
    return facts.growth not in (None, "any")


_CRITERIA: Final = (
    _Criterion("bed", 1.0, _bed_known, _compare_bed),
    _Criterion("slope", 1.0, lambda facts: facts.slope is not None, _compare_slope),
    _Criterion("depth of the water", 1.0, lambda facts: _water(facts) is not None, _compare_water),
    _Criterion("plants", 1.0, lambda facts: facts.plants is not None, _compare_plants),
    _Criterion("state of growth", 0.5, _growth_known, _compare_growth),
)
