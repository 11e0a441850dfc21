"""Rules about grades beside what was measured for them."""

from typing import Final

import numpy as np

from roughness.findings.facts import FactorFacts, Facts, Flags, Words
from roughness.findings.rule import COMMON_PRACTICE, Case, rule, rule_of_each
from roughness.findings.wording import FACTOR_WORDS, both, either, in_words, ratio, starting
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_value
from roughness.survey.words import FACTORS, Factor

SHORTEST_IN_WIDTHS: Final = 10.0
SIZES_APART: Final = 2.0

THE_CRITERION: Final = "the published criterion of the handbook in use"


def holds(lists: Words, word: Words) -> Flags:
    """Whether the blank-separated list of each row holds the word of that row."""
    padded = np.char.add(np.char.add(" ", lists), " ")
    found: Flags = np.char.find(padded, np.char.add(np.char.add(" ", word), " ")) >= 0
    return found


def _one_grade_above(chosen: FactorFacts) -> Flags:
    above: Flags = (chosen.word("acting_together") == "yes") & (
        chosen.rank == chosen.candidates_rank + 1
    )
    return above


def _contradicts(chosen: FactorFacts) -> Flags:
    asked: Flags = (chosen.grade != "") & (chosen.candidates != "")
    if not asked.any():  # comparing words is slow; most rows have no criterion
        return asked
    allowed = holds(chosen.candidates, chosen.grade) | holds(chosen.near, chosen.grade)
    return asked & ~allowed & ~_one_grade_above(chosen)


@rule_of_each(
    "grade-against-criterion",
    "ask",
    meaning="the chosen grade is not the one its measured criterion points to",
    source=THE_CRITERION,
    factors=FACTORS,
)
def grade_against_criterion(facts: Facts, factor: Factor) -> Case:
    """Obstructions that act together may stand one grade above their percentage."""
    chosen = facts.factors[factor]
    return Case(
        _contradicts(chosen),
        lambda row: (
            f"{starting(printable(chosen.measured_says[row]))} points to "
            f"{either(chosen.candidates[row])}, but the {FACTOR_WORDS[factor]} was graded "
            f"'{in_words(chosen.grade[row])}'; correct one of them or say in a note why both hold."
        ),
    )


@rule_of_each(
    "near-class-edge",
    "tell",
    meaning="the measured criterion lies so near a class edge that both grades are offered",
    source=COMMON_PRACTICE,
    factors=FACTORS,
)
def near_class_edge(facts: Facts, factor: Factor) -> Case:
    """At an edge the measurement is not sharp enough to tell the grades apart."""
    chosen = facts.factors[factor]
    return Case(
        chosen.near != "",
        lambda row: (
            f"{starting(printable(chosen.measured_says[row]))} lies near the edge between "
            f"{both(chosen.near[row])}; both fit, and the range may cover both."
        ),
    )


@rule(
    "short-stretch-for-sinuosity",
    "ask",
    meaning="sinuosity was measured over less than ten channel widths",
    source=COMMON_PRACTICE,
    about="meander",
)
def short_stretch_for_sinuosity(facts: Facts) -> Case:
    """Ask, since a stretch shorter than a bend or two says little about bends."""
    length = facts.factors["meander"].number("channel_length_m")
    return Case(
        length < SHORTEST_IN_WIDTHS * facts.width_m,
        lambda row: (
            f"Sinuosity was taken from {show_value(length[row])} m of channel, "
            f"{ratio(length[row], facts.width_m[row])} times its width of "
            f"{show_value(facts.width_m[row])} m; measure at least ten widths."
        ),
    )


@rule(
    "plants-not-in-grade",
    "ask",
    meaning="the grade of vegetation does not speak of the kind of plants that was seen",
    source=THE_CRITERION,
    about="vegetation",
)
def plants_not_in_grade(facts: Facts) -> Case:
    """Silent where depth over plant height already judges the grade."""
    chosen = facts.factors["vegetation"]
    plants = chosen.word("plants")
    asked = (plants != "") & (chosen.kinds != "") & (chosen.candidates == "")
    return Case(
        asked & ~holds(chosen.kinds, plants) if asked.any() else asked,
        lambda row: (
            f"The vegetation was graded '{in_words(chosen.grade[row])}', which speaks of "
            f"{either(chosen.kinds[row])}, but '{in_words(plants[row])}' was seen; "
            "pick the grade that names it or say in a note why this one fits."
        ),
    )


@rule(
    "bed-sizes-differ",
    "ask",
    meaning="the d50 of the base and the measured d50 are more than twice apart",
    source=COMMON_PRACTICE,
    about="base",
)
def bed_sizes_differ(facts: Facts) -> Case:
    """Ask where the same bed was given two sizes."""
    of_base, measured = facts.factors["base"].number("d50_mm"), facts.d50_mm
    apart = (of_base > SIZES_APART * measured) | (measured > SIZES_APART * of_base)
    return Case(
        apart,
        lambda row: (
            f"The base value goes by a d50 of {show_value(of_base[row])} mm, but "
            f"{show_value(measured[row])} mm was measured; say which one is this bed's."
        ),
    )


RULES = (
    grade_against_criterion,
    near_class_edge,
    short_stretch_for_sinuosity,
    plants_not_in_grade,
    bed_sizes_differ,
)
