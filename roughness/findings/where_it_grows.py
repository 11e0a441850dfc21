"""Rules about where plants grow: the same plants weigh less where they line less of the bed."""

from typing import Final

import numpy as np

from roughness.findings.facts import Facts, Numbers
from roughness.findings.ranges import NOISE
from roughness.findings.rule import COMMON_PRACTICE, Case, rule
from roughness.findings.wording import ratio
from roughness.quantities.printing import show_addend, show_value

WIDE: Final = 30.0  # width over depth
NARROW: Final = 10.0
MOST_IF_WIDE: Final = 0.005
MOST_IF_NARROW: Final = 0.03
SMALL_SHARE: Final = 25.0  # percent of the wetted perimeter


def _depth(facts: Facts) -> Numbers:
    """Return the measured mean depth, else the one given with the vegetation, m."""
    given = facts.factors["vegetation"].number("depth_m")
    return np.where(np.isnan(facts.depth_m), given, facts.depth_m)


@rule(
    "bank-plants-against-shape",
    "ask",
    meaning="plants on the banks alone add more than a section this wide or narrow allows",
    source="Arcement & Schneider 1989 (USGS WSP 2339), text on vegetation, memory; "
    "the limits of width over depth: common practice, no source",
    about="vegetation",
)
def bank_plants_against_shape(facts: Facts) -> Case:
    """Ask: the wider the section, the less of it the banks hold back."""
    chosen, depth = facts.factors["vegetation"], _depth(facts)
    wide = (facts.width_m >= WIDE * depth) & (chosen.best > MOST_IF_WIDE + NOISE)
    narrow = (facts.width_m <= NARROW * depth) & (chosen.best > MOST_IF_NARROW + NOISE)

    def says(row: int) -> str:
        usual = MOST_IF_WIDE if wide[row] else MOST_IF_NARROW
        times = ratio(facts.width_m[row], depth[row], 0)
        return (
            f"Plants stand on the banks alone and the section is {times} times as wide as deep, "
            f"but vegetation adds {show_addend(chosen.best[row])}; up to {show_addend(usual)} is "
            "usual there. Lower it, tell bed and banks apart, or say why in a note."
        )

    return Case(
        (chosen.word("where") == "banks") & facts.whole_part & (depth > 0) & (wide | narrow), says
    )


@rule(
    "few-plants-for-their-value",
    "ask",
    meaning="plants line under 25 % of the wetted perimeter and add more than 0.005",
    source=COMMON_PRACTICE,
    about="vegetation",
)
def few_plants_for_their_value(facts: Facts) -> Case:
    """Ask, since a grade describes a section that its plants fill."""
    chosen = facts.factors["vegetation"]
    share = chosen.number("perimeter_percent")
    return Case(
        (share < SMALL_SHARE) & (chosen.best > MOST_IF_WIDE + NOISE),
        lambda row: (
            f"Plants line {show_value(share[row])} % of the wetted perimeter, but vegetation adds "
            f"{show_addend(chosen.best[row])}; lower it, tell bed and banks apart, or say why in "
            "a note."
        ),
    )


RULES = (bank_plants_against_shape, few_plants_for_their_value)
