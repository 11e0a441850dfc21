"""From the bytes of a TOML file of measured streams to the catalogue, or to one sentence."""

from collections.abc import Iterable, Mapping
from typing import Annotated, Any, Final

from pydantic import BaseModel, ConfigDict, Field, ValidationError

from roughness.comparison.measured_streams import (
    Bed,
    Event,
    MeasuredStream,
    Plant,
    Provenance,
    StreamFile,
)
from roughness.errors import InputError
from roughness.handbook.toml_shape import Key, Text, place_of
from roughness.hydraulics.unit_systems import FOOT_M
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.printing import show_value
from roughness.quantities.strict_toml import read_toml
from roughness.survey.words import Growth, Setting

Positive = Annotated[float, Field(gt=0)]
_ORIGINALS: Final[dict[str, tuple[str, float]]] = {
    "discharge_ft3s": ("discharge_m3s", FOOT_M**3),
    "area_ft2": ("area_m2", FOOT_M**2),
    "hydraulic_radius_ft": ("hydraulic_radius_m", FOOT_M),
    "depth_ft": ("depth_m", FOOT_M),
    "velocity_fts": ("velocity_ms", FOOT_M),
}
# Figures are printed with three digits or more.
_ROUNDING: Final = 0.005
_LARGEST_GRAIN_MM: Final = 10_000.0
_WANTED: Final[dict[str, str]] = {
    "n": "Manning's n of a flood, above 0 and at most 1, is due",
    "date": "a year, month or day such as 1964-03-12 is due",
    "slope": "metres of fall a metre, such as 0.002, is due",
    "key": "small letters, digits and single hyphens are due",
    "d50_mm": f"a size in mm, above 0 and at most {_LARGEST_GRAIN_MM:.0f}, is due",
    "d84_mm": f"a size in mm, above 0 and at most {_LARGEST_GRAIN_MM:.0f}, is due",
    "float_type": "a number is due",
    "string_type": "text in quotes is due",
    "finite_number": "a finite number is due",
    "list_type": "a list is due",
    "dict_type": "a table is due",
    "model_type": "a table is due",
    "greater_than": "above 0 is due",
    "empty_text": "it is empty",
    "control": "it holds a control or direction character",
}
"""What would be right, by field or by kind of fault."""


class _Strict(BaseModel):
    model_config = ConfigDict(extra="forbid", strict=True, allow_inf_nan=False, frozen=True)


class OriginalShape(_Strict):
    """The figures in the units of the publication."""

    discharge_ft3s: Positive | None = None
    area_ft2: Positive | None = None
    hydraulic_radius_ft: Positive | None = None
    depth_ft: Positive | None = None
    velocity_fts: Positive | None = None


class EventShape(_Strict):
    """One measured flow."""

    # n above 1 was measured in trickles between boulders and says nothing of a flood.
    n: Annotated[float, Field(gt=0, le=1)]
    date: Annotated[str, Field(pattern=r"^\d{4}(-\d{2}){0,2}$")] | None = None
    discharge_m3s: Positive | None = None
    area_m2: Positive | None = None
    hydraulic_radius_m: Positive | None = None
    depth_m: Positive | None = None
    velocity_ms: Positive | None = None
    slope: Annotated[float, Field(gt=0, le=1)] | None = None
    plants: list[Plant] | None = None
    growth: Growth | None = None
    vegetation: Text | None = None
    derived: list[str] = []
    original: OriginalShape = OriginalShape()


class StreamShape(_Strict):
    """One reach."""

    key: Key
    stream: Text
    place: Text
    setting: Setting
    bed: list[Bed] = []
    bed_facts: Text | None = None
    d50_mm: Annotated[float, Field(gt=0, le=_LARGEST_GRAIN_MM)] | None = None
    d84_mm: Annotated[float, Field(gt=0, le=_LARGEST_GRAIN_MM)] | None = None
    plants: list[Plant] | None = None
    vegetation: Text | None = None
    source: Text
    page: Text | None = None
    read_at: Text | None = None
    provenance: Provenance
    notes: list[Text] = []
    events: Annotated[list[EventShape], Field(min_length=1)]


class StreamFileShape(_Strict):
    """A whole file."""

    title: Text
    notes: list[Text] = []
    sources: dict[Key, Text] = {}
    """Citations that streams name by key."""
    streams: Annotated[list[StreamShape], Field(min_length=1)]


def parse_streams(raw: bytes, where: str) -> StreamFile:
    """Parse and check a file of measured streams.

    Parameters
    ----------
    raw : bytes
        TOML in UTF-8, at most 1 MiB; its format is ``roughness schema measured-streams``.
    where : str
        Name of the file, for messages.

    Raises
    ------
    InputError
        In one sentence: the file, the place in it, the reason, and what would be right.
    """
    where = printable(where)
    document = read_toml(raw, where, due="a list of measured streams in TOML")
    try:
        shape = StreamFileShape.model_validate(document)
    except ValidationError as error:
        raise _first_fault(error, document, where) from None
    keys: set[str] = set()
    for stream in shape.streams:
        place = f"{where}: streams.{stream.key}"
        if stream.key in keys:
            raise InputError("two streams have this key", where=place, wanted="each key once")
        keys.add(stream.key)
        _check(stream, place)
    return StreamFile(
        title=shape.title,
        notes=tuple(shape.notes),
        streams=tuple(_built(stream, shape.sources) for stream in shape.streams),
    )


def _check(stream: StreamShape, place: str) -> None:
    if stream.d50_mm and stream.d84_mm and stream.d84_mm < stream.d50_mm:
        raise InputError(
            f"d84 {show_value(stream.d84_mm)} mm is below d50 {show_value(stream.d50_mm)} mm",
            where=f"{place}.d84_mm",
            wanted="84 percent of the stones are finer than d84",
        )
    for number, event in enumerate(stream.events, 1):
        _check_event(event, f"{place}.events.{number}")


def _check_event(event: EventShape, place: str) -> None:
    if unknown := set(event.derived) - set(EventShape.model_fields):
        raise InputError(
            f"{printable(min(unknown))!r} is no field",
            where=f"{place}.derived",
            wanted="name fields of the event",
        )
    for name, figure in _known_originals(event.original):
        metric, factor = _ORIGINALS[name]
        value = getattr(event, metric)
        if value is None or abs(value - figure * factor) > _ROUNDING * value:
            raise InputError(
                f"{metric} is {'missing' if value is None else show_value(value)} beside"
                f" {name} {show_value(figure)}",
                where=place,
                wanted=f"{show_value(float(f'{figure * factor:.5g}'))} is due",
            )
    if event.discharge_m3s and event.area_m2 and event.velocity_ms:
        mean = event.discharge_m3s / event.area_m2
        if abs(event.velocity_ms - mean) > 10 * _ROUNDING * mean:
            raise InputError(
                f"the velocity {show_value(event.velocity_ms)} m/s is not discharge over area",
                where=f"{place}.velocity_ms",
                wanted=f"{show_value(float(f'{mean:.4g}'))} m/s is due",
            )


def _known_originals(original: OriginalShape) -> Iterable[tuple[str, float]]:
    return ((name, figure) for name, figure in original if figure is not None)


def _built(shape: StreamShape, sources: Mapping[str, str]) -> MeasuredStream:
    return MeasuredStream(
        key=shape.key,
        stream=shape.stream,
        place=shape.place,
        setting=shape.setting,
        bed=tuple(shape.bed),
        bed_facts=shape.bed_facts or "",
        d50_mm=shape.d50_mm,
        d84_mm=shape.d84_mm,
        plants=None if shape.plants is None else tuple(shape.plants),
        vegetation=shape.vegetation or "",
        source=sources.get(shape.source, shape.source),
        page=shape.page or "",
        read_at=shape.read_at or "",
        provenance=shape.provenance,
        notes=tuple(shape.notes),
        events=tuple(_event(event) for event in shape.events),
    )


def _event(shape: EventShape) -> Event:
    plants = None if shape.plants is None else tuple(shape.plants)
    return Event(
        **shape.model_dump(exclude={"original", "vegetation", "plants", "derived"}),
        plants=plants,
        vegetation=shape.vegetation or "",
        derived=tuple(shape.derived),
        original=dict(_known_originals(shape.original)),
    )


def _first_fault(error: ValidationError, document: dict[str, Any], where: str) -> InputError:
    faults = error.errors(include_url=False)
    # A misspelt key makes two faults; the one that shows the spelling helps more.
    fault = next((f for f in faults if f["type"] == "extra_forbidden"), faults[0])
    loc, kind = fault["loc"], fault["type"]
    place = f"{where}: {place_of(loc, document)}"
    if kind == "extra_forbidden":
        known = nearest(str(loc[-1]), _names_beside(loc))
        return InputError(
            "this key is not known", where=place, wanted=f"{known}?" if known else "leave it out"
        )
    if kind == "missing":
        return InputError("it is missing", where=place, wanted="say it, or leave the stream out")
    if kind in ("too_short", "too_long"):
        return InputError("it has no entry", where=place, wanted="one or more is due")
    shown = printable(repr(fault["input"]))[:60]
    return InputError(f"{shown} will not do", where=place, wanted=_wanted(fault))


def _wanted(fault: Any) -> str:
    kind, place = fault["type"], str(fault["loc"][-1])
    if kind == "literal_error":
        words = str(fault["ctx"]["expected"]).replace("'", "").replace(" or ", ", ")
        from_memory = place == "provenance" and str(fault["input"]) == "memory"
        reason = "what is only remembered is no measured stream; " if from_memory else ""
        return f"{reason}one of {words} is due"
    message = str(fault["msg"])
    return _WANTED.get(place) or _WANTED.get(kind) or message[:1].lower() + message[1:]


def _names_beside(loc: tuple[int | str, ...]) -> list[str]:
    """Return the keys that are known where an unknown one was met."""
    if "original" in loc[:-1]:
        return list(OriginalShape.model_fields)
    if "events" in loc[:-1]:
        return list(EventShape.model_fields)
    return list((StreamShape if len(loc) > 1 else StreamFileShape).model_fields)
