"""The field sheet: what to look at, note and photograph at each reach, to take along printed.

Grades carry the numbers that take them in the walk, so that typing in goes by the sheet.
Values of n are left off unless asked for: who sees them judges towards them.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from roughness.desk.folder import SurveyFolder
from roughness.errors import RoughnessError
from roughness.handbook import FactorTable, Grade, Handbook
from roughness.quantities.printing import show_addend, show_value
from roughness.reports.pages import page
from roughness.reports.reach_sections import stretch
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.survey.words import (
    INHERITED,
    MAIN_CHANNEL,
    MULTIPLIER,
    SETTINGS,
    USUAL_PARTS,
    Factor,
    Setting,
    factors_of,
)
from roughness.trail.state import ReachState

# The walk takes a grade by one digit; the rest are reached with the arrows.
_DIGITS: Final = 9
# What a factor is judged by beside its words, to be measured or paced at the reach. Ours.
_LINES: Final[dict[Factor, tuple[str, ...]]] = {
    "base": ("d50 (mm)", "d84 (mm)", "sand: ripples, dunes or flat"),
    "irregularity": (),
    "variation": (),
    "obstruction": ("blocked (% of the flow area at the condition's stage)",),
    "vegetation": ("plants, and where", "height (m)", "share of the perimeter (%)"),
    "meander": ("channel length (m)", "valley length (m)", "or sinuosity"),
}


@dataclass(frozen=True, kw_only=True)
class GradeTold:
    """A grade with the key that takes it in the walk."""

    key: str
    """A digit; empty beyond the ninth."""
    grade: Grade
    range: str


@dataclass(frozen=True, kw_only=True)
class FactorTold:
    """A factor with its question, its grades and what to measure."""

    factor: Factor
    symbol: str
    table: FactorTable
    grades: tuple[GradeTold, ...]
    lines: tuple[str, ...]
    columns: tuple[str, ...]
    """What has a column of boxes: the parts, and under each condition where that is asked."""


@dataclass(frozen=True, kw_only=True)
class SettingTold:
    """The factors of the parts of one setting."""

    setting: Setting
    parts: tuple[Part, ...]
    handbook: Handbook
    factors: tuple[FactorTold, ...]


@dataclass(frozen=True, kw_only=True)
class Sheet:
    """What is taken along for one reach, or for any."""

    reach: Reach | None
    stretch: str
    settings: tuple[SettingTold, ...]
    fault: str = ""


def field_sheet(survey: SurveyFolder, *, with_ranges: bool = False) -> bytes:
    """Return the sheets of all reaches as one page, or a single one where there is no reach.

    Parameters
    ----------
    survey : SurveyFolder
        The survey.
    with_ranges : bool
        Whether the published range stands beside each grade.
    """
    names = [noted.reach for noted in survey.state.reaches]
    return page(
        "fieldsheet.html",
        survey=survey.state,
        sheets=[_sheet(survey, name) for name in names] or [_sheet(survey, None)],
        conditions=survey.state.conditions,
        with_ranges=with_ranges,
    )


def _sheet(survey: SurveyFolder, name: str | None) -> Sheet:
    reach: Reach | None = None
    parts: tuple[Part, ...] = ()
    chosen: dict[str, str] = {}
    fault = ""
    if name is not None:
        try:
            reach, state = survey.reach(name), survey.reach_state(name)
            parts, chosen = state.parts, _chosen_handbooks(state)
        except RoughnessError as error:
            reach, fault = survey.noted_reach(name), str(error)
    asked = parts or _usual_parts(survey.state.conditions)
    try:
        settings = tuple(_settings(survey, asked, chosen))
    except RoughnessError as error:
        # The handbook it was judged by is gone: its keys are not known, the usual ones are.
        settings, fault = tuple(_settings(survey, asked, {})), str(error)
    return Sheet(
        reach=reach,
        stretch=stretch(reach, survey.state.described.length_unit) if reach else "",
        settings=settings,
        fault=fault,
    )


def _usual_parts(conditions: Sequence[FlowCondition]) -> tuple[Part, ...]:
    """Return the parts to ask about where nobody named any: plains only where they are wetted."""
    wetted = not conditions or any(c.bank != "in bank" for c in conditions)
    return tuple(
        Part(part=part, setting=setting)
        for part, setting in USUAL_PARTS.items()
        if wetted or part == MAIN_CHANNEL
    )


def _settings(
    survey: SurveyFolder, parts: Sequence[Part], chosen: Mapping[str, str]
) -> Iterator[SettingTold]:
    """Yield the parts by setting and handbook: another handbook has other keys."""
    conditions = survey.state.conditions
    for setting in SETTINGS:
        of_books: dict[str, tuple[Handbook, list[Part]]] = {}
        for part in parts:
            if part.setting == setting:
                book, _ = survey.handbook_for(chosen.get(part.part), setting)
                of_books.setdefault(book.sha256, (book, []))[1].append(part)
        for book, named in of_books.values():
            yield SettingTold(
                setting=setting,
                parts=tuple(named),
                handbook=book,
                factors=tuple(
                    _factor(book, setting, factor, named, conditions)
                    for factor in factors_of(setting)
                ),
            )


def _chosen_handbooks(state: ReachState) -> dict[str, str]:
    """Return the handbook that each part was judged by so far."""
    return {
        place.part: place.handbook for place in state.places.values() if place.handbook is not None
    }


def _factor(
    book: Handbook,
    setting: Setting,
    factor: Factor,
    parts: Sequence[Part],
    conditions: Sequence[FlowCondition],
) -> FactorTold:
    table = book.table(setting, factor)
    return FactorTold(
        factor=factor,
        symbol=book.symbols[factor],
        table=table,
        grades=tuple(
            GradeTold(
                key=str(at) if at <= _DIGITS else "",
                grade=grade,
                range=_range(factor, grade),
            )
            for at, grade in enumerate(table.grades, start=1)
        ),
        lines=_LINES[factor],
        columns=tuple(_columns(factor, setting, parts, conditions)),
    )


def _columns(
    factor: Factor, setting: Setting, parts: Sequence[Part], conditions: Sequence[FlowCondition]
) -> Iterator[str]:
    wetting = [c for c in conditions if setting == "channel" or c.bank != "in bank"]
    for part in parts:
        if factor in INHERITED or len(wetting) < 2:
            yield part.part
        else:
            yield from (f"{part.part}, {condition.condition}" for condition in wetting)


def _range(factor: Factor, grade: Grade) -> str:
    if grade.by_d50_mm:
        return "by size"
    show = show_value if factor == MULTIPLIER else show_addend
    if grade.low == grade.high:
        return show(grade.low)
    return f"{show(grade.low)} to {show(grade.high)}"
