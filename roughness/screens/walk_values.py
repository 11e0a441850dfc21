"""Low, best and high typed; and a note, asked for where it is due."""

from collections.abc import Callable, Mapping

from roughness.errors import InputError
from roughness.quantities.measures import Quantity, read_measure
from roughness.quantities.printing import show_value
from roughness.quantities.ranges import Range
from roughness.screens.form import Field
from roughness.screens.walk_form import WalkForm
from roughness.survey.words import MULTIPLIER, Factor

_WHAT_FOR = "Why this grade and value here: what somebody else needs to judge it."


def values_dialog(
    factor: Factor, grade: str, now: Range | None, set_range: Callable[[Range], object]
) -> WalkForm:
    """Return the form for the range of the highlighted grade.

    Parameters
    ----------
    factor : str
        The factor at hand.
    grade : str
        Name of the highlighted grade.
    now : Range or None
        What is there now.
    set_range : function
        Takes the range; a note is asked for when it is taken.
    """
    quantity: Quantity = "ratio" if factor == MULTIPLIER else "roughness"

    def keep(values: Mapping[str, str]) -> bool:
        set_range(range_from(values, quantity))
        return True

    fields = [
        Field(key=key, label=key, value="" if now is None else show_value(getattr(now, key)))
        for key in ("low", "best", "high")
    ]
    return WalkForm(
        f"Value and range: {factor}, {grade}",
        fields,
        keep,
        says="Outside the published range a note is asked for when you take it.",
    )


def range_from(values: Mapping[str, str], quantity: Quantity) -> Range:
    """Return the range as it was typed.

    Raises
    ------
    InputError
        Where a number cannot be read, or they are out of order.
    """
    low, best, high = (read_measure(values[key], quantity, key) for key in ("low", "best", "high"))
    if not low <= best <= high:
        raise InputError("the values are out of order", wanted="low <= best <= high is due")
    return Range(low, best, high)


def note_dialog(
    title: str, now: str | None, keep_note: Callable[[str], object], why: str = ""
) -> WalkForm:
    """Return the form for a note.

    Parameters
    ----------
    title : str
        What the note is about.
    now : str or None
        What it says now.
    keep_note : function
        Takes the note.
    why : str
        Why it is asked for; then it may not stay empty.
    """

    def keep(values: Mapping[str, str]) -> bool:
        note = values["note"].strip()
        if why and not note:
            raise InputError("the note is empty", wanted="a few words why, or Esc")
        keep_note(note)
        return True

    field = Field(
        key="note",
        label="Why",
        value=now or "",
        hint="such as: seen on both banks, photo 12",
    )
    return WalkForm(title, [field], keep, says=why or _WHAT_FOR, does="keep the note")
