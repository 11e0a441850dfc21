"""Rules about ranges: published limits, gaps, too narrow, outside what was measured."""

from typing import Final

import numpy as np

from roughness.findings.facts import FactorFacts, Facts, Flags
from roughness.findings.rule import COMMON_PRACTICE, Case, rule, rule_of_each
from roughness.findings.wording import FACTOR_WORDS, factor_value, in_words, starting
from roughness.quantities.printing import rounded, show_n, show_value
from roughness.survey.words import FACTORS, NOT_ON_FLOOD_PLAINS, Factor

# Sums such as 0.1 + 0.2 carry noise in the 17th digit; no table has steps this small.
NOISE: Final = 1e-12
NARROWEST: Final = 0.10
LEAST_IN_CHANNELS: Final = 0.017
MOST_IN_CHANNELS: Final = 0.15
STEEP: Final = 0.02
MOST_ON_FLOOD_PLAINS: Final = 0.20

THE_TABLE: Final = "the published table of the handbook in use"


def _outside(chosen: FactorFacts) -> Flags:
    return (chosen.low < chosen.published_low - NOISE) | (
        chosen.high > chosen.published_high + NOISE
    )


def _best(chosen: FactorFacts, factor: Factor, row: int) -> str:
    return f"{starting(FACTOR_WORDS[factor])} {factor_value(factor, chosen.best[row])}"


def _says_outside(facts: Facts, factor: Factor, row: int) -> str:
    chosen = facts.factors[factor]
    low, high, least, most = (
        factor_value(factor, column[row])
        for column in (chosen.low, chosen.high, chosen.published_low, chosen.published_high)
    )
    published = f"published {least} to {most}" if least != most else f"single published {least}"
    grade = f" for '{in_words(chosen.grade[row])}'" if chosen.grade[row] else ""
    told = _best(chosen, factor, row)
    return f"{told}, from {low} to {high}, leaves the {published}{grade}"


def _beyond(n: float, limit: float, side: str) -> str:
    """Say that n is above or below a limit, also where both print alike."""
    just = "just " if show_n(n) == show_n(limit) else ""
    return f"n {show_n(n)} is {just}{side} {show_n(limit)}"


@rule_of_each(
    "outside-published-range",
    "stop",
    meaning="a value or a limit leaves the published range and no note says why",
    source=THE_TABLE,
    factors=FACTORS,
)
def outside_published_range(facts: Facts, factor: Factor) -> Case:
    """Best lies between low and high, so the limits tell of all three."""
    chosen = facts.factors[factor]
    return Case(
        _outside(chosen) & ~chosen.noted,
        lambda row: (
            f"{_says_outside(facts, factor, row)}, and no note says why; "
            "say why in a note or return to the published range."
        ),
    )


@rule_of_each(
    "outside-published-range-noted",
    "ask",
    meaning="a value or a limit leaves the published range; the reviewer weighs the note",
    source=THE_TABLE,
    factors=FACTORS,
)
def outside_published_range_noted(facts: Facts, factor: Factor) -> Case:
    """Leaving the range with a reason is allowed, and still somebody should weigh it."""
    chosen = facts.factors[factor]
    return Case(
        _outside(chosen) & chosen.noted,
        lambda row: f"{_says_outside(facts, factor, row)}; does its note carry that far?",
    )


@rule_of_each(
    "own-value-without-note",
    "stop",
    meaning="a value of one's own stands where nothing is published, and no note says why",
    source=COMMON_PRACTICE,
    factors=FACTORS,
)
def own_value_without_note(facts: Facts, factor: Factor) -> Case:
    """Where no table backs a value, only a note can."""
    chosen = facts.factors[factor]
    unbacked = ~np.isnan(chosen.best) & np.isnan(chosen.published_low) & ~chosen.noted
    if factor in NOT_ON_FLOOD_PLAINS:
        unbacked = unbacked & ~facts.on_flood_plain
    return Case(
        unbacked,
        lambda row: (
            f"{_best(chosen, factor, row)} rests on no "
            "published value and on no note; say in a note where it comes from."
        ),
    )


@rule_of_each(
    "inside-published-gap",
    "tell",
    meaning="the best value lies where the table jumps from one grade to the next",
    source=THE_TABLE,
    factors=FACTORS,
)
def inside_published_gap(facts: Facts, factor: Factor) -> Case:
    """Nobody published a value there: it belongs to neither grade."""
    chosen = facts.factors[factor]
    return Case(
        (chosen.best > chosen.gap_low) & (chosen.best < chosen.gap_high),
        lambda row: (
            f"{_best(chosen, factor, row)} lies between two "
            f"grades: nothing is published from {factor_value(factor, chosen.gap_low[row])} to "
            f"{factor_value(factor, chosen.gap_high[row])}."
        ),
    )


@rule(
    "range-narrow",
    "ask",
    meaning="low and high of n are the same or less than 10 % of n apart",
    source=COMMON_PRACTICE,
)
def range_narrow(facts: Facts) -> Case:
    """Nobody reads n off a stream that closely."""
    width = facts.n_high - facts.n_low

    def says(row: int) -> str:
        if width[row] <= 0:
            return (
                f"n {show_n(facts.n_best[row])} has no range at all; "
                "give low and high, or say in a note why the value is certain."
            )
        share = rounded(100 * float(width[row] / facts.n_best[row]), 0)
        return (
            f"The whole range of n, {show_n(facts.n_low[row])} to {show_n(facts.n_high[row])}, "
            f"is {share} % of n, closer than n can be judged by eye; widen it or say why in a note."
        )

    return Case((width < NARROWEST * facts.n_best - NOISE) & facts.whole_part, says)


@rule(
    "n-low-for-channel",
    "ask",
    meaning="n of a channel is below 0.017, lower than in nature, and no noted lining says why",
    source="limit from memory; the lowest n read in Barnes 1967 (USGS WSP 1849) is 0.024",
)
def n_low_for_channel(facts: Facts) -> Case:
    """Ask: a noted concrete lining explains it, in a natural stream it is rarely right."""
    low = facts.n_best < LEAST_IN_CHANNELS
    explained = facts.lined & facts.factors["base"].noted
    return Case(
        low & facts.in_channel & facts.whole_part & ~explained,
        lambda row: (
            f"{_beyond(facts.n_best[row], LEAST_IN_CHANNELS, 'below')}, lower than natural "
            "channels are measured; say in a note what makes this one so smooth, a lining for one."
        ),
    )


@rule(
    "n-high-for-channel",
    "ask",
    meaning="n of a channel is above 0.15 and its slope is not known to be 0.02 or more",
    source=COMMON_PRACTICE,
)
def n_high_for_channel(facts: Facts) -> Case:
    """Steep streams with large roughness reach it; an unknown slope excuses nothing."""
    high = (facts.n_best > MOST_IN_CHANNELS + NOISE) & ~(facts.slope >= STEEP)

    def says(row: int) -> str:
        slope = facts.slope[row]
        told = "of unknown slope" if np.isnan(slope) else f"of slope {show_value(slope)}"
        return (
            f"{_beyond(facts.n_best[row], MOST_IN_CHANNELS, 'above')} in a channel {told}, more "
            "than is measured where slopes are under 0.02; check that nothing is counted twice."
        )

    return Case(high & facts.in_channel & facts.whole_part, says)


@rule(
    "n-high-for-flood-plain",
    "ask",
    meaning="n of a flood plain is above 0.20, more than was measured on wooded plains",
    source="Arcement & Schneider 1989 (USGS WSP 2339), largest n of its measured flood plains",
)
def n_high_for_flood_plain(facts: Facts) -> Case:
    """Ask above the 0.20 that the densest measured flood plains of the guide reach."""
    high = facts.n_best > MOST_ON_FLOOD_PLAINS + NOISE
    return Case(
        high & facts.on_flood_plain & facts.whole_part,
        lambda row: (
            f"{_beyond(facts.n_best[row], MOST_ON_FLOOD_PLAINS, 'above')}, the most measured on "
            "wooded flood plains; check that nothing is counted twice, or say in a note why."
        ),
    )


RULES = (
    outside_published_range,
    outside_published_range_noted,
    own_value_without_note,
    inside_published_gap,
    range_narrow,
    n_low_for_channel,
    n_high_for_channel,
    n_high_for_flood_plain,
)
