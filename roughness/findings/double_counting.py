"""Rules about one thing in the stream that two factors answer for."""

from typing import Final

from roughness.findings.facts import Facts, Flags
from roughness.findings.ranges import NOISE
from roughness.findings.rule import COMMON_PRACTICE, Case, rule
from roughness.findings.wording import factor_value, in_words
from roughness.survey.words import Factor

# Lower limits of these grades in USGS WSP 2339; Cowan's values of the same grades lie above
# them, so one limit serves every handbook, and values of one's own too.
MODERATE_IRREGULARITY: Final = 0.006
MINOR_OBSTRUCTION: Final = 0.005
WOODY_VEGETATION: Final = 0.025
AVERAGE_BASE_FROM: Final = "usgs-wsp-2339"

WSP_2339_ON_COUNTING: Final = (
    "Arcement & Schneider 1989 (USGS WSP 2339), memory: no effect is counted in two factors"
)
WSP_2339_ON_BASE: Final = (
    "Arcement & Schneider 1989 (USGS WSP 2339), table 1, memory: one column smoothest, one average"
)
COWAN_ON_BENDS: Final = "Cowan 1956, memory: the multiplier answers for the bends"


def _adds(facts: Facts, factor: Factor, at_least: float) -> Flags:
    adds: Flags = facts.factors[factor].best >= at_least - NOISE
    return adds


def _varies(facts: Facts) -> Flags:
    varies: Flags = facts.factors["variation"].best > 0
    return varies


def _multiplies(facts: Facts) -> Flags:
    multiplies: Flags = facts.factors["meander"].best > 1
    return multiplies


def _neither_noted(facts: Facts, one: Factor, other: Factor) -> Flags:
    return ~(facts.factors[one].noted | facts.factors[other].noted)


def _value(facts: Facts, factor: Factor, row: int) -> str:
    return factor_value(factor, facts.factors[factor].best[row])


@rule(
    "trees-counted-twice",
    "ask",
    meaning="obstruction and woody vegetation both add: where are trees and logs counted?",
    source=WSP_2339_ON_COUNTING,
    about="obstruction",
)
def trees_counted_twice(facts: Facts) -> Case:
    """Silent where somebody said where they are counted, or the plants seen are not woody."""
    unsaid = (facts.factors["obstruction"].word("counted_in") == "") & (
        facts.factors["vegetation"].word("plants") == ""
    )
    return Case(
        unsaid
        & _adds(facts, "obstruction", MINOR_OBSTRUCTION)
        & _adds(facts, "vegetation", WOODY_VEGETATION),
        lambda row: (
            f"Obstruction adds {_value(facts, 'obstruction', row)} and vegetation "
            f"{_value(facts, 'vegetation', row)}: trees and logs may be in both; "
            "say in which one they are counted."
        ),
    )


@rule(
    "widening-counted-twice",
    "ask",
    meaning="irregularity is moderate or more and the section varies: the same widening twice?",
    source=WSP_2339_ON_COUNTING,
    about="variation",
)
def widening_counted_twice(facts: Facts) -> Case:
    """Scalloped banks and a changing section can be one and the same thing."""
    return Case(
        _adds(facts, "irregularity", MODERATE_IRREGULARITY)
        & _varies(facts)
        & _neither_noted(facts, "irregularity", "variation"),
        lambda row: (
            f"Irregularity adds {_value(facts, 'irregularity', row)} and variation of the section "
            f"{_value(facts, 'variation', row)}; say in a note that they are not the same widening."
        ),
    )


@rule(
    "bends-counted-twice",
    "ask",
    meaning="variation of the section and the multiplier both add: the same bends twice?",
    source=COWAN_ON_BENDS,
    about="variation",
)
def bends_counted_twice(facts: Facts) -> Case:
    """Flow that shifts from side to side in bends belongs to the multiplier."""
    return Case(
        _varies(facts) & _multiplies(facts) & _neither_noted(facts, "variation", "meander"),
        lambda row: (
            f"Variation of the section adds {_value(facts, 'variation', row)} beside a multiplier "
            f"of {_value(facts, 'meander', row)}; say in a note that the variation is not the "
            "flow shifting in the bends."
        ),
    )


@rule(
    "valley-slope-with-multiplier",
    "ask",
    meaning="the slope was taken along the valley and the multiplier is above 1",
    source="derived: n for the valley slope holds the square root of the sinuosity already",
    about="meander",
)
def valley_slope_with_multiplier(facts: Facts) -> Case:
    """Ask, since a valley slope is steeper than the channel's by the sinuosity."""
    return Case(
        (facts.slope_along == "valley") & _multiplies(facts),
        lambda row: (
            f"The slope runs along the valley, and the multiplier is "
            f"{_value(facts, 'meander', row)}; the bends count twice unless the slope is taken "
            "along the channel."
        ),
    )


@rule(
    "smoothest-base-in-nature",
    "ask",
    meaning="the base is the smoothest attainable although other factors show a natural stream",
    source=WSP_2339_ON_BASE,
    about="base",
)
def smoothest_base_in_nature(facts: Facts) -> Case:
    """Anything that another factor adds is a sign of nature."""
    base = facts.factors["base"]
    signs = _varies(facts) | _multiplies(facts)
    for factor in ("irregularity", "obstruction", "vegetation"):
        signs = signs | (facts.factors[factor].best > 0)
    return Case(
        base.lower_bound & signs,
        lambda row: (
            f"The base '{in_words(base.grade[row])}', {_value(facts, 'base', row)}, is the "
            "smoothest such a bed can be, but other factors show a natural stream; take the "
            "average value or say in a note why the bed is that smooth."
        ),
    )


@rule(
    "average-base-with-irregularity",
    "tell",
    meaning="an average base value holds some irregularity, and moderate or more is added to it",
    source=WSP_2339_ON_BASE,
    about="irregularity",
)
def average_base_with_irregularity(facts: Facts) -> Case:
    """Concrete is as even as it was built; no plain was measured for the average."""
    base = facts.factors["base"]
    average = (base.grade != "") & ~facts.lined & ~base.lower_bound
    return Case(
        (facts.handbook == AVERAGE_BASE_FROM)
        & facts.in_channel
        & average
        & _adds(facts, "irregularity", MODERATE_IRREGULARITY),
        lambda row: (
            f"The base '{in_words(base.grade[row])}' is an average of measured channels and may "
            "hold some irregularity already; irregularity adds another "
            f"{_value(facts, 'irregularity', row)}."
        ),
    )


@rule(
    "boulders-counted-twice",
    "ask",
    meaning="the base is boulder and obstruction is minor or more: the same boulders twice?",
    source=COMMON_PRACTICE,
    about="obstruction",
)
def boulders_counted_twice(facts: Facts) -> Case:
    """Boulders that make the bed are no obstruction on it."""
    obstruction = facts.factors["obstruction"]
    return Case(
        (facts.factors["base"].grade == "boulder")
        & _adds(facts, "obstruction", MINOR_OBSTRUCTION)
        & ~obstruction.noted,
        lambda row: (
            "The base is 'boulder' and obstruction adds "
            f"{_value(facts, 'obstruction', row)}; say in a note what obstructs besides the "
            "boulders of the bed."
        ),
    )


RULES = (
    trees_counted_twice,
    widening_counted_twice,
    bends_counted_twice,
    valley_slope_with_multiplier,
    smoothest_base_in_nature,
    average_base_with_irregularity,
    boulders_counted_twice,
)
