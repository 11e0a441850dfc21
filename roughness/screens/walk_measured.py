"""What can be measured for one factor, as a form; it suggests a grade and takes none."""

from collections.abc import Callable, Mapping
from dataclasses import replace
from typing import Final, get_args

from roughness.desk.places import Place
from roughness.quantities.measures import Quantity, read_known_measure
from roughness.quantities.printing import show_value
from roughness.screens.form import Field
from roughness.screens.walk_form import WalkForm
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    VegetationChoice,
)
from roughness.survey.words import Edges, Factor, Plants, Regime

OWN_BEST: Final = "own_best"
NOTE: Final = "note"
_NUMBERS: Final[dict[Factor, tuple[tuple[str, str, Quantity, str], ...]]] = {
    "base": (("d50_mm", "Grain size d50", "size", "such as 34 mm or 1.3 in"),),
    "obstruction": (
        ("blocked_percent", "Blocked", "percent", "such as 8 % of the flow area; 0: nothing"),
    ),
    "vegetation": (
        ("vegetation_height_m", "Height of plants", "length", "such as 0.6 m or 2 ft"),
        ("depth_m", "Mean depth", "length", "such as 1.4 m, at this flow condition"),
        (
            "perimeter_percent",
            "Perimeter planted",
            "percent",
            "such as 40 % of the wetted perimeter",
        ),
    ),
    "meander": (
        ("sinuosity", "Sinuosity", "ratio", "channel length over valley length, such as 1.3"),
        ("channel_length_m", "Or: channel length", "length", "such as 640 m"),
        ("valley_length_m", "    valley length", "length", "such as 500 m"),
    ),
}
_UNITS: Final[dict[Quantity, str]] = {"length": "m", "size": "mm", "percent": "%"}
_UNKNOWN: Final = "not said"


def has_measures(factor: Factor) -> bool:
    """Whether anything measured can decide this factor."""
    return factor in _NUMBERS


def measured_dialog(
    place: Place, factor: Factor, known: Choice, typed: Callable[[Choice], object]
) -> WalkForm:
    """Return the form of one factor; ``typed`` takes what was filled in.

    Parameters
    ----------
    place : Place
        Where; the depth of the gate is filled in beside plants.
    factor : str
        A factor that :func:`has_measures`.
    known : Choice
        What is known already.
    typed : function
        Takes the choice with the criteria; may refuse it.
    """

    def keep(values: Mapping[str, str]) -> bool:
        typed(criteria_from(factor, values, known))
        return True

    return WalkForm(
        f"Measured or observed: {factor}",
        _fields(place, factor, known),
        keep,
        says="Suggests a grade; nothing is taken before Enter in the table.",
    )


def sand_dialog(
    place: Place, known: BaseChoice, keep: Callable[[BaseChoice, float | None, str], object]
) -> WalkForm:
    """Return what is asked when sand is picked: regime, size, or a value of one's own.

    ``keep`` takes the criteria, one's own best value where one was typed, and the note.
    """

    def take(values: Mapping[str, str]) -> bool:
        choice = criteria_from("base", values, known)
        assert isinstance(choice, BaseChoice)
        own = read_known_measure(values[OWN_BEST], "roughness", "own value of n")
        keep(choice, own, values[NOTE])
        return True

    fields = _fields(place, "base", known)
    fields = [field for field in fields if field.key == "regime"] + [
        field for field in fields if field.key != "regime"
    ]
    fields += [
        Field(
            key=OWN_BEST,
            label="Own value of n",
            hint="only where no size is known or published (0.2 to 1 mm is)",
        ),
        Field(key=NOTE, label="Note", value=known.note or "", hint="why this value"),
    ]
    return WalkForm(
        "Sand: the flow shapes its bed, and with it n",
        fields,
        take,
        says="The published value holds for the upper regime only: plane bed or standing"
        " waves, no ripples or dunes.",
    )


def criteria_from(factor: Factor, values: Mapping[str, str], known: Choice) -> Choice:
    """Return ``known`` with the criteria as they were typed.

    Raises
    ------
    InputError
        Where a number cannot be read.
    """
    numbers = {
        key: read_known_measure(values[key], quantity, label.strip())
        for key, label, quantity, _ in _NUMBERS[factor]
    }
    words: dict[str, object] = {
        key: None if values[key] == _UNKNOWN else values[key]
        for key in _WORDS[factor]
        if key in values
    }
    if "acting_together" in words:
        words["acting_together"] = _FLAGS[words["acting_together"]]
    return replace(known, **numbers, **words)  # type: ignore[arg-type]


_FLAGS: Final[dict[object, bool | None]] = {"yes": True, "no": False, None: None}


def _options(*words: str) -> tuple[str, ...]:
    return (_UNKNOWN, *words)


# What is observed in words, by factor: label, choices and hint of each.
_WORDS: Final[dict[Factor, dict[str, tuple[str, tuple[str, ...]]]]] = {
    "base": {"regime": ("Flow regime on sand", _options(*get_args(Regime)))},
    "obstruction": {
        "acting_together": ("Acting together", _options("no", "yes")),
        "edges": ("Edges", _options(*get_args(Edges))),
        "counted_in": ("Trees counted as", _options("obstruction", "vegetation")),
    },
    "vegetation": {
        "plants": ("Kind of plants", _options(*get_args(Plants))),
        "where": ("They grow on", _options("bed", "banks", "all")),
    },
    "meander": {},
}


def _fields(place: Place, factor: Factor, known: Choice) -> list[Field]:
    numbers = [
        Field(
            key=key,
            label=label,
            value=_shown(getattr(known, key), quantity) or _prefilled(place, known, key),
            hint=hint,
        )
        for key, label, quantity, hint in _NUMBERS[factor]
    ]
    words = [
        Field(key=key, label=label, value=_word(getattr(known, key)), choices=choices)
        for key, (label, choices) in _WORDS[factor].items()
    ]
    if place.part.setting != "channel":
        words = [field for field in words if field.key != "regime"]
    return [*numbers, *words]


def _prefilled(place: Place, known: Choice, key: str) -> str:
    """Return what the gate knows already about plants and the grain of the bed."""
    if isinstance(known, BaseChoice) and key == "d50_mm" and not place.segments:
        return _shown(place.measured.d50_mm, "size")
    if not isinstance(known, VegetationChoice):
        return ""
    told = {"depth_m": place.depth_m, "vegetation_height_m": place.measured.vegetation_height_m}
    return _shown(told.get(key), "length")


def _shown(value: float | None, quantity: Quantity) -> str:
    return "" if value is None else f"{show_value(value)} {_UNITS.get(quantity, '')}".strip()


def _word(value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return str(value) if value is not None else _UNKNOWN
