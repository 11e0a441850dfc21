"""A section's input text read into a :class:`Section`, or refused in one sentence."""

import json
from typing import Any, Final

from roughness.assessment.reading import read_strictly
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_json import read_json
from roughness.survey.sections import Roughness, Section

MOST_POINTS: Final = 5000


def read_section(raw: bytes, where: str) -> Section:
    """Read the JSON text of one section; ``where`` names it in messages.

    Raises
    ------
    InputError
        For anything that is not such a document: one sentence with the field.
    """
    return section_from(read_json(raw, where), where)


def section_from(document: Any, where: str) -> Section:
    """Read a parsed JSON document.

    Raises
    ------
    InputError
        As :func:`read_section`.
    """
    if not isinstance(document, dict):
        raise InputError("no JSON object", where=where, wanted='it starts with {"points": ...')
    _refuse_points(document.get("points"), where)
    for place, holder in _holders_of_n(document):
        _refuse_n(holder.get("n"), f"{where}: {place}.n")
    section = read_strictly(Section, document, where)
    assert isinstance(section, Section)
    return section


def _refuse_points(points: Any, where: str) -> None:
    if not isinstance(points, list):
        return
    if len(points) > MOST_POINTS:
        raise InputError(
            f"{len(points)} points are too many", where=f"{where}: points", wanted=_thin_out()
        )
    for i, point in enumerate(points, start=1):
        if not (isinstance(point, list) and len(point) == 2 and all(map(_is_number, point))):
            raise InputError(
                f"point {i} is {_shown(point)}",
                where=f"{where}: points",
                wanted="a point is [distance, height], two numbers in m",
            )


def _thin_out() -> str:
    return f"thin them out to at most {MOST_POINTS}"


def _holders_of_n(document: dict[str, Any]) -> list[tuple[str, dict[str, Any]]]:
    """Return parts and segments with their places, as far as they are objects."""
    found = []
    parts = document.get("parts")
    for i, part in enumerate(parts if isinstance(parts, list) else []):
        if not isinstance(part, dict):
            continue
        found.append((f"parts.{i}", part))
        segments = part.get("segments")
        for j, segment in enumerate(segments if isinstance(segments, list) else []):
            if isinstance(segment, dict):
                found.append((f"parts.{i}.segments.{j}", segment))
    return found


def _refuse_n(n: Any, place: str) -> None:
    """Refuse n that is neither a number nor a range; what is absent is judged later."""
    if n is None or _is_number(n):
        return
    if not isinstance(n, dict):
        raise InputError(
            f"{_shown(n)} does not fit",
            where=place,
            wanted="a number, or an object with low, best and high is due",
        )
    read_strictly(Roughness, n, place)


def _is_number(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool)


def _shown(met: Any) -> str:
    text = json.dumps(met, ensure_ascii=False)
    return printable(text if len(text) <= 60 else f"{text[:57]}...")
