"""The facts that rules look at: columns, one row a part of a reach.

Every column has the shape (N,); one estimate is N = 1. Unknown numbers are NaN (a
comparison with NaN is false, so a rule stays silent where a fact is missing), unknown
words are the empty string. A column with a default may also be left out: one unknown
value then stands for all rows.

A part whose bed and banks are told apart has a row for each segment, with its name in
``segment``, and a row for the whole part whose factors are unknown (`nothing_chosen`).
"""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from roughness.survey.words import FACTORS, Factor

Numbers = NDArray[np.float64]
Flags = NDArray[np.bool_]
Words = NDArray[np.str_]

UNKNOWN: Numbers = np.array(np.nan)
UNSAID: Words = np.array("")


@dataclass(frozen=True, kw_only=True)
class FactorFacts:
    """What was chosen for one factor, beside what its table says."""

    grade: Words
    """Key of the grade, '' where numbers stand alone."""
    rank: Numbers
    """Place of the grade in its table, 0 for the first; NaN where there is none."""
    low: Numbers
    best: Numbers
    high: Numbers
    published_low: Numbers
    """NaN where nothing is published for the grade as it was met."""
    published_high: Numbers
    own_best: Flags
    """Whether the best value was given and not taken from the table."""
    noted: Flags
    lower_bound: Flags
    """Whether the grade's value is the smoothest attainable (base alone)."""
    measured_says: Words
    """The measured criterion in words, 'blocked 8 %'; '' where none was given.

    The criterion is the factor's own; where it has none, the ``measured`` block's (its d50
    for the base, its depth and plant height for the vegetation).
    """
    candidates: Words
    """Grades the measured criterion leaves, separated by blanks; '' where it is silent."""
    candidates_rank: Numbers = field(default_factory=lambda: UNKNOWN)
    """Rank of the last of the candidates in the table; NaN where there is none."""
    near: Words
    """Both grades, separated by a blank, where the criterion lies near a class edge; else ''."""
    gap_low: Numbers
    """Limits of the published gap that holds the best value; NaN where there is none."""
    gap_high: Numbers
    kinds: Words = field(default_factory=lambda: UNSAID)
    """Kinds of plants the grade's criterion names, separated by blanks; '' where it names none."""
    numbers: Mapping[str, Numbers] = field(default_factory=dict)
    """Criteria that are numbers, by field name of the choice."""
    words: Mapping[str, Words] = field(default_factory=dict)
    """Criteria that are words or yes/no ('yes', 'no'), by field name of the choice."""

    def number(self, name: str) -> Numbers:
        """Return the criterion ``name``, NaN where nobody gave it."""
        return self.numbers.get(name, UNKNOWN)

    def word(self, name: str) -> Words:
        """Return the criterion ``name``, '' where nobody gave it."""
        return self.words.get(name, UNSAID)


@dataclass(frozen=True, kw_only=True)
class Facts:
    """Everything an estimate's own rules may look at."""

    setting: Words
    asked_handbook: Words
    """The handbook that was asked for; it differs from the next where a plain was handed over."""
    handbook: Words
    segment: Words = field(default_factory=lambda: UNSAID)
    """Name of the segment the row stands for, '' where it is the whole part."""
    n_low: Numbers
    n_best: Numbers
    n_high: Numbers
    factors: Mapping[Factor, FactorFacts]
    """By factor; a flood plain has its variation and meander at 0 and 1."""
    d50_mm: Numbers
    d84_mm: Numbers
    slope: Numbers
    hydraulic_radius_m: Numbers
    depth_m: Numbers
    width_m: Numbers
    vegetation_height_m: Numbers
    slope_along: Words

    def __len__(self) -> int:
        return len(self.setting)

    @property
    def in_channel(self) -> Flags:
        """Whether the row's part is a channel."""
        rows: Flags = self.setting == "channel"
        return rows

    @property
    def on_flood_plain(self) -> Flags:
        """Whether the row's part is a flood plain."""
        rows: Flags = self.setting == "flood-plain"
        return rows

    @property
    def lined(self) -> Flags:
        """Whether the row's part is lined with concrete."""
        grade = self.factors["base"].grade
        rows: Flags = (grade == "concrete") | (grade == "concrete-smooth")
        return rows

    @property
    def whole_part(self) -> Flags:
        """Whether the row stands for a whole part and not for its bed or banks."""
        rows: Flags = self.segment == ""
        return rows


def nothing_chosen(rows: int) -> dict[Factor, FactorFacts]:
    """Return ``rows`` rows in which no factor is known: a whole part told apart by segments."""
    number, word, flag = np.full(rows, np.nan), np.full(rows, ""), np.zeros(rows, dtype=bool)
    unknown = FactorFacts(
        grade=word,
        rank=number,
        low=number,
        best=number,
        high=number,
        published_low=number,
        published_high=number,
        own_best=flag,
        noted=flag,
        lower_bound=flag,
        measured_says=word,
        candidates=word,
        near=word,
        gap_low=number,
        gap_high=number,
    )
    return dict.fromkeys(FACTORS, unknown)
