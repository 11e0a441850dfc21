"""The facts of one judgement, laid out as the columns that the findings look at."""

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import numpy as np

from roughness.assessment.resolving import Resolved, criterion_numbers, noted
from roughness.findings import FactorFacts, Facts, nothing_chosen
from roughness.handbook import Candidates, Handbook, candidates, gap_around
from roughness.quantities.foreign_text import same_name_key
from roughness.quantities.ranges import Range
from roughness.survey.choices import CHOICES, Measured
from roughness.survey.words import Factor, Setting


def facts_of(
    handbook: Handbook,
    asked_handbook: str,
    setting: Setting,
    resolved: Mapping[Factor, Resolved],
    measured: Measured,
    n: Range,
    segment: str | None = None,
) -> Facts:
    """Return one row of facts (N = 1) for one part, or one segment of it.

    ``resolved`` is empty for a part as a whole whose segments have rows of their own.
    """
    if segment is not None and "bed" not in same_name_key(segment):
        measured = replace(measured, d50_mm=None)  # a size of the bed, and not of the banks
    factors = {
        factor: _factor_facts(handbook, setting, entry, measured)
        for factor, entry in resolved.items()
    }
    return Facts(
        segment=_word(segment),
        setting=_word(setting),
        asked_handbook=_word(asked_handbook),
        handbook=_word(handbook.key),
        n_low=_number(n.low),
        n_best=_number(n.best),
        n_high=_number(n.high),
        factors=factors or nothing_chosen(1),
        d50_mm=_number(measured.d50_mm),
        d84_mm=_number(measured.d84_mm),
        slope=_number(measured.slope),
        hydraulic_radius_m=_number(measured.hydraulic_radius_m),
        depth_m=_number(measured.depth_m),
        width_m=_number(measured.width_m),
        vegetation_height_m=_number(measured.vegetation_height_m),
        slope_along=_word(measured.slope_along),
    )


def _factor_facts(
    handbook: Handbook, setting: Setting, entry: Resolved, measured: Measured
) -> FactorFacts:
    grade, published = entry.grade, entry.published
    left = entry.candidates
    if not left.grades and grade is not None:
        left = _from_measured(handbook, setting, entry, measured)
    gap = gap_around(handbook, setting, entry.factor, entry.range.best) if grade else None
    criteria = criterion_numbers(entry.choice)
    names = [name for name in CHOICES[entry.factor].__dataclass_fields__ if name in _KINDS]
    ranks = [handbook.rank(setting, entry.factor, key) for key in left.grades]
    kinds = {m.plants for m in grade.measured if m.plants} if grade else set()
    return FactorFacts(
        grade=_word(entry.grade_key),
        rank=_number(handbook.rank(setting, entry.factor, grade.key) if grade else None),
        low=_number(entry.range.low),
        best=_number(entry.range.best),
        high=_number(entry.range.high),
        published_low=_number(published.low if published else None),
        published_high=_number(published.high if published else None),
        own_best=np.array([entry.choice.best is not None]),
        noted=np.array([noted(entry.choice)]),
        lower_bound=np.array([bool(grade and grade.lower_bound)]),
        measured_says=_word(left.says),
        candidates=_word(" ".join(left.grades)),
        candidates_rank=_number(max(ranks, default=None)),
        near=_word(" ".join(left.near)),
        gap_low=_number(gap[0] if gap else None),
        gap_high=_number(gap[1] if gap else None),
        kinds=_word(" ".join(sorted(kinds))),
        numbers={n: _number(criteria.get(n)) for n in names if _KINDS[n] is float},
        words={n: _word(_yes_or_no(criteria.get(n))) for n in names if _KINDS[n] is str},
    )


def _from_measured(
    handbook: Handbook, setting: Setting, entry: Resolved, measured: Measured
) -> Candidates:
    """Return what the measurements of the part say of a factor that has none of its own."""
    known = entry.choice.criteria()
    if entry.factor == "base":
        filled = {"d50_mm": measured.d50_mm}
    elif entry.factor == "vegetation" and "plants" in known:
        filled = {"depth_m": measured.depth_m, "vegetation_height_m": measured.vegetation_height_m}
    else:
        return entry.candidates
    criteria = {name: value for name, value in (filled | known).items() if value is not None}
    return candidates(handbook, setting, entry.factor, criteria)


_KINDS: dict[str, type] = {
    "d50_mm": float,
    "regime": str,
    "blocked_percent": float,
    "acting_together": str,
    "edges": str,
    "counted_in": str,
    "depth_m": float,
    "vegetation_height_m": float,
    "plants": str,
    "where": str,
    "perimeter_percent": float,
    "sinuosity": float,
    "channel_length_m": float,
    "valley_length_m": float,
}


def _yes_or_no(value: Any) -> str | None:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return value if value is None else str(value)


def _number(value: float | None) -> np.ndarray[Any, np.dtype[np.float64]]:
    return np.array([np.nan if value is None else value], dtype=np.float64)


def _word(value: str | None) -> np.ndarray[Any, np.dtype[np.str_]]:
    return np.array([value or ""], dtype=np.str_)
