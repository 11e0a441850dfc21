"""Lists of reaches from outside: CSV and GeoJSON. All bad rows are named at once."""

import csv
import io
import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import Any

from roughness.errors import InputError
from roughness.quantities.foreign_text import checked_name, nearest, printable, same_name_key
from roughness.quantities.strict_json import decoded, read_json
from roughness.survey.stream import Reach

LARGEST_LIST = 64 << 20
_KNOWN = ("reach", "from", "to", "slope", "lon", "lat", "note")
_MOST_NAMED = 20

Positions = tuple[tuple[float, float], ...]


@dataclass(frozen=True)
class ReachList:
    """The reaches in the order of the file, and the columns that were not used."""

    reaches: tuple[Reach, ...]
    unused: tuple[str, ...]


def read_reach_list(raw: bytes, file_name: str) -> ReachList:
    """Read a list of reaches; GeoJSON where the name or the text says so, else CSV.

    Parameters
    ----------
    raw : bytes
        The file, UTF-8. CSV: a header with ``reach`` and any of ``from``, ``to``, ``slope``
        (m/m), ``lon``, ``lat`` (degrees, WGS 84), ``note``. GeoJSON (RFC 7946): features
        with these as properties; points, lines or no geometry.
    file_name : str
        Stands in messages and tells the format by its ending.

    Raises
    ------
    InputError
        Every bad row is named, with what is wrong and what would be right.
    """
    if len(raw) > LARGEST_LIST:
        raise InputError(
            f"{len(raw)} bytes are too many", where=file_name, wanted=f"at most {LARGEST_LIST}"
        )
    is_json = file_name.lower().endswith((".json", ".geojson")) or raw.lstrip()[:1] == b"{"
    rows, unused = _features(raw, file_name) if is_json else _lines(raw, file_name)
    reaches = _reaches(rows, file_name)
    if not reaches:
        raise InputError("it holds no reach", where=file_name, wanted="one row a reach is due")
    return ReachList(tuple(reaches), unused)


@dataclass(frozen=True)
class _Row:
    place: str
    values: dict[str, Any]
    position: Positions | None = None


def _lines(raw: bytes, file_name: str) -> tuple[list[_Row], tuple[str, ...]]:
    text = decoded(raw, file_name)
    if not text.strip():
        raise InputError("it is empty", where=file_name, wanted="a header and one row a reach")
    if "\x00" in text:
        raise InputError("it holds a NUL character", where=file_name, wanted="plain CSV text")
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    try:
        header = [name.strip().casefold() for name in next(reader)]
        _check_header(header, file_name)
        rows = [
            _line_row(reader.line_num, header, cells)
            for cells in reader
            if any(cell.strip() for cell in cells)
        ]
    except csv.Error as error:
        raise InputError(f"line {reader.line_num}: {error}", where=file_name) from None
    return rows, tuple(name for name in header if name not in _KNOWN)


def _check_header(header: list[str], file_name: str) -> None:
    if "reach" not in header:
        if len(header) == 1 and ";" in header[0]:
            raise InputError(
                "its columns are divided by semicolons", where=file_name, wanted="save with commas"
            )
        hint = nearest("reach", header)
        raise InputError(
            f"no column is named reach{f' ({hint})' if hint else ''}",
            where=f"{file_name}, line 1",
            wanted=f"a header with reach and any of {', '.join(_KNOWN[1:])}",
        )
    twice = [name for name in header if header.count(name) > 1 and name in _KNOWN]
    if twice:
        raise InputError(f"the column {twice[0]} stands there twice", where=f"{file_name}, line 1")


def _line_row(line: int, header: list[str], cells: list[str]) -> _Row:
    if len(cells) > len(header) and any(cells[len(header) :]):
        return _Row(f"line {line}", {"_extra": f"{len(cells)} cells, the header has {len(header)}"})
    named = zip(header, cells, strict=False)
    return _Row(f"line {line}", {name: cell.strip() for name, cell in named if cell.strip()})


def _features(raw: bytes, file_name: str) -> tuple[list[_Row], tuple[str, ...]]:
    document = read_json(raw, file_name, largest=LARGEST_LIST)
    features = document.get("features") if isinstance(document, dict) else None
    if not isinstance(features, list):
        raise InputError(
            "no GeoJSON feature collection", where=file_name, wanted='{"type": "FeatureCollection"'
        )
    if "4326" not in (crs := str(document.get("crs", "4326"))) and "CRS84" not in crs:
        raise InputError(
            "its coordinates are projected",
            where=file_name,
            wanted="longitude and latitude, WGS 84",
        )
    rows = [_feature_row(f"feature {i}", feature) for i, feature in enumerate(features, 1)]
    used = dict.fromkeys(key for row in rows for key in row.values if not key.startswith("_"))
    return rows, tuple(key for key in used if key not in _KNOWN)


def _feature_row(place: str, feature: Any) -> _Row:
    properties = feature.get("properties") if isinstance(feature, dict) else None
    if not isinstance(properties, dict):
        return _Row(place, {"_extra": "no properties"})
    values = {str(key): value for key, value in properties.items() if value is not None}
    if "reach" not in values and isinstance(values.get("name"), str):
        values["reach"] = values.pop("name")
    try:
        return _Row(place, values, _positions(feature.get("geometry")))
    except InputError as error:
        return _Row(place, {"_extra": str(error)})


def _positions(geometry: Any) -> Positions | None:
    if geometry is None:
        return None
    kind = geometry.get("type") if isinstance(geometry, dict) else None
    if kind not in ("Point", "LineString"):
        raise InputError(f"a geometry of type {kind!r}", wanted="Point, LineString or null")
    points = geometry.get("coordinates")
    return tuple(_position(p) for p in ([points] if kind == "Point" else points or [None]))


def _position(pair: Any) -> tuple[float, float]:
    numbers = isinstance(pair, list) and len(pair) >= 2
    if not numbers or not all(isinstance(x, int | float) for x in pair[:2]):
        raise InputError(f"{pair!r} is no position", wanted="[longitude, latitude]")
    lon, lat = float(pair[0]), float(pair[1])
    if not (-180 <= lon <= 180 and -90 <= lat <= 90):
        raise InputError(
            f"{lon}, {lat} is no longitude and latitude", wanted="degrees, WGS 84, not projected"
        )
    return lon, lat


def _reaches(rows: Iterable[_Row], file_name: str) -> list[Reach]:
    reaches: list[Reach] = []
    wrong: list[str] = []
    places: dict[str, str] = {}
    for row in rows:
        try:
            reach = _reach(row)
            first = places.setdefault(same_name_key(reach.reach), row.place)
            if first != row.place:
                raise InputError(
                    f"the name {printable(reach.reach)!r} is that of {first}", wanted="rename one"
                )
            reaches.append(reach)
        except InputError as error:
            wrong.append(f"{row.place}: {error}")
    if wrong:
        more = [f"... and {len(wrong) - _MOST_NAMED} more"] if len(wrong) > _MOST_NAMED else []
        count = "1 row" if len(wrong) == 1 else f"{len(wrong)} rows"
        listed = "\n  ".join(wrong[:_MOST_NAMED] + more)
        raise InputError(
            f"{count} cannot be used, so nothing was made:\n  {listed}", where=file_name
        )
    return reaches


def _reach(row: _Row) -> Reach:
    if "_extra" in row.values:
        raise InputError(row.values["_extra"])
    name = row.values.get("reach", "")
    if not isinstance(name, str):
        raise InputError(f"the reach {name!r} is no text", wanted="a name in quotes")
    note = row.values.get("note")
    return Reach(
        reach=checked_name(name, "reach name"),
        reach_from=_number(row, "from", math.isfinite, "a distance"),
        reach_to=_number(row, "to", math.isfinite, "a distance"),
        slope=_number(row, "slope", lambda x: 0 <= x < 1, "a ratio below 1, 2 per mille is 0.002"),
        position=row.position or _lon_lat(row),
        note=str(note) if note else None,
    )


def _lon_lat(row: _Row) -> Positions | None:
    lon = _number(row, "lon", lambda x: -180 <= x <= 180, "degrees from -180 to 180")
    lat = _number(row, "lat", lambda x: -90 <= x <= 90, "degrees from -90 to 90")
    if (lon is None) != (lat is None):
        raise InputError("lon and lat must both be there", wanted="or neither")
    return None if lon is None or lat is None else ((lon, lat),)


def _number(row: _Row, name: str, fits: Callable[[float], bool], wanted: str) -> float | None:
    met = row.values.get(name)
    if met is None:
        return None
    try:
        value = math.nan if isinstance(met, bool) else float(met)
    except (TypeError, ValueError):
        comma = isinstance(met, str) and met.count(",") == 1
        raise InputError(
            f"{name} {printable(str(met))!r} is no number",
            wanted=f"write {met.replace(',', '.')}" if comma else wanted,
        ) from None
    if not math.isfinite(value) or not fits(value):
        raise InputError(f"{name} {printable(str(met))!r} does not fit", wanted=wanted)
    return value
