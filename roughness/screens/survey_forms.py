"""The forms that add something to a survey: each writes one line when it is taken."""

from collections.abc import Mapping
from datetime import date
from pathlib import Path
from typing import Final

from roughness.desk.reach_lists import read_reach_list
from roughness.desk.recording import Recorder
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_range
from roughness.screens.form import Field, Form
from roughness.screens.survey_lines import SurveyLine
from roughness.screens.typed import number, number_or_none, text_or_none
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.survey.words import GROWTHS, USUAL_TOLERANCE_CM, Bank, Growth, Setting

_UNKNOWN: Final = "unknown"
_BANKS: Final[dict[str, Bank | None]] = {
    _UNKNOWN: None,
    "in bank": "in bank",
    "over bank": "over bank",
}
_GROWTHS: Final[dict[str, Growth]] = {growth: growth for growth in GROWTHS}
_SETTINGS: Final[dict[str, Setting]] = {"channel": "channel", "flood plain": "flood-plain"}


def condition_form(pen: Recorder) -> Form[str]:
    """Ask for a flow condition; the result is its name."""

    def take(typed: Mapping[str, str]) -> str:
        condition = FlowCondition(
            condition=typed["name"].strip(),
            growth=_GROWTHS[typed["growth"]],
            bank=_BANKS[typed["bank"]],
            discharge_m3s=number_or_none(typed["discharge"], "the discharge"),
            tolerance_cm=number(typed["tolerance"], "the tolerance"),
        )
        if pen.survey.state.condition(condition.condition):
            raise InputError("the survey has this flow condition already", wanted="another name")
        pen.add_condition(condition)
        return condition.condition

    return Form(
        "New flow condition",
        [
            Field(key="name", label="Name", hint="such as: design flood, leaf-on"),
            Field(key="growth", label="Growth", value="any", choices=GROWTHS),
            Field(key="bank", label="The water is", value=_UNKNOWN, choices=tuple(_BANKS)),
            Field(key="discharge", label="Discharge, m3/s", hint="leave empty if not known"),
            Field(key="tolerance", label="Level needed to ± cm", value=f"{USUAL_TOLERANCE_CM:g}"),
        ],
        take,
        says="What the n is for. Ice and debris jams are outside the method.",
        does="add the flow condition",
    )


def visit_form(pen: Recorder, reach: str) -> Form[str]:
    """Ask who was at a reach, when, and what was seen."""

    def take(typed: Mapping[str, str]) -> str:
        on = text_or_none(typed["on"])
        growth = typed["growth"]
        visit = Visit(
            visit=on or "visit",
            on=on,
            people=text_or_none(typed["people"]),
            stage=text_or_none(typed["stage"]),
            growth=None if growth == _UNKNOWN else _GROWTHS[growth],
            flood_marks=text_or_none(typed["marks"]),
            note=text_or_none(typed["note"]),
        )
        pen.note_visit(reach, visit)
        return visit.visit

    seen = (_UNKNOWN, *(growth for growth in GROWTHS if growth != "any"))
    return Form(
        f"Visit to {printable(reach)}",
        [
            Field(key="on", label="Date", value=date.today().isoformat()),
            Field(key="people", label="Who was there", value=pen.by),
            Field(
                key="stage", label="Stage or depth", hint="such as: knee-deep, 0.4 m at the gauge"
            ),
            Field(key="growth", label="Growth", value=_UNKNOWN, choices=seen),
            Field(key="marks", label="Flood marks", hint="such as: wrack line 1.2 m above the bed"),
            Field(key="note", label="Note"),
        ],
        take,
        does="note the visit",
    )


def part_form(pen: Recorder, reach: str) -> Form[str]:
    """Ask for a part with a name of one's own; the result is its name."""

    def take(typed: Mapping[str, str]) -> str:
        part = Part(
            part=typed["name"].strip(),
            setting=_SETTINGS[typed["setting"]],
            part_from=number_or_none(typed["from"], "the left limit"),
            part_to=number_or_none(typed["to"], "the right limit"),
        )
        pen.add_part(reach, part)
        return part.part

    return Form(
        f"New part of {printable(reach)}",
        [
            Field(key="name", label="Name", hint="such as: side arm"),
            Field(key="setting", label="Judged as", value="channel", choices=tuple(_SETTINGS)),
            Field(key="from", label="From, m", hint="from the left end of the section"),
            Field(key="to", label="To, m", hint="left and right look downstream"),
        ],
        take,
        does="add the part",
    )


def reach_form(pen: Recorder) -> Form[str]:
    """Ask for one reach, or the file of many; the result is the name of the first."""

    def take(typed: Mapping[str, str]) -> str:
        if file := text_or_none(typed["file"]):
            found = reaches_in(file)
        else:
            found = (
                Reach(
                    reach=typed["name"].strip(),
                    reach_from=number_or_none(typed["from"], "the beginning"),
                    reach_to=number_or_none(typed["to"], "the end"),
                    slope=number_or_none(typed["slope"], "the slope"),
                    note=text_or_none(typed["note"]),
                ),
            )
            typed_lengths = found[0].reach_from is not None or found[0].reach_to is not None
            if typed_lengths and known and not pen.survey.state.described.length_unit:
                pen.describe(length_unit=known)
        for reach in found:
            pen.add_reach(reach)
        return found[0].reach

    # Lengths that came with a list in no unit may be anything: then the form claims none either.
    has_lengths = any(noted.reach_to is not None for noted in pen.survey.state.reaches)
    known = pen.survey.state.described.length_unit or ("" if has_lengths else "m")
    unit = f", {known}" if known else ""
    return Form(
        "New reach",
        [
            Field(key="name", label="Name", hint="such as: Osier bend"),
            Field(key="from", label=f"From{unit}", hint="distance along the stream"),
            Field(key="to", label=f"To{unit}", hint="a number, as in the list: 320"),
            Field(key="slope", label="Slope", hint="2 in a thousand is 0.002"),
            Field(key="note", label="Note", hint="why n may jump here, for instance"),
            Field(key="file", label="Or from a file", hint="CSV or GeoJSON with many reaches"),
        ],
        take,
        says="It goes to the downstream end of the list.",
        does="add the reach",
    )


def note_form(pen: Recorder, reach: Reach) -> Form[str]:
    """Ask for what is to be known of the reach; an empty note takes the old one back."""

    def take(typed: Mapping[str, str]) -> str:
        pen.describe_reach(reach.reach, note=text_or_none(typed["note"]))
        return reach.reach

    return Form(
        f"Note on {printable(reach.reach)}",
        [
            Field(
                key="note",
                label="Note",
                value=reach.note or "",
                hint="such as: the willows begin at the fence, hence the jump",
            )
        ],
        take,
    )


def adopt_form(pen: Recorder, line: SurveyLine) -> Form[str]:
    """Ask for the n that goes to the model in place of the estimate, and why."""
    row = line.row
    assert row.part and row.condition
    reach, part, condition = row.reach.reach, row.part.part, row.condition.condition

    def take(typed: Mapping[str, str]) -> str:
        pen.adopt(
            reach,
            part,
            condition,
            number(typed["n"], "n"),
            low=number_or_none(typed["low"], "the low n"),
            high=number_or_none(typed["high"], "the high n"),
            reason=typed["reason"],
        )
        return reach

    n = row.estimate.n if row.estimate else None
    told = f"The estimate is {show_n(n.best)} ({show_range(n)}). " if n else ""
    return Form(
        f"Adopt another n: {printable(reach)}, {printable(part)}",
        [
            Field(key="n", label="n for the model"),
            Field(key="low", label="Low", hint="leave empty if there is no range"),
            Field(key="high", label="High"),
            Field(
                key="reason", label="Reason", hint="such as: calibrated to the flood of May 2024"
            ),
        ],
        take,
        says=f"{printable(condition)}. {told}It stays beside what you adopt.",
        does="adopt it",
    )


def reaches_in(file: str) -> tuple[Reach, ...]:
    """Return the reaches of a CSV or GeoJSON file.

    Raises
    ------
    InputError
        Where it cannot be read; every bad row is named.
    """
    path = Path(file).expanduser()
    try:
        raw = path.read_bytes()
    except OSError as error:
        raise InputError(
            f"it cannot be read ({error.strerror})", where=printable(file), wanted="name a file"
        ) from None
    return read_reach_list(raw, printable(path.name)).reaches
