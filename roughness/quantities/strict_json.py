"""JSON read strictly: UTF-8, no repeated keys, no NaN or infinity, not nested without end."""

import json
import math
from collections import Counter
from typing import Any, NoReturn

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable

DEEPEST = 64
LARGEST = 1 << 20


def decoded(raw: bytes, where: str) -> str:
    """Return UTF-8 text (a byte order mark is allowed), or say where it stops being UTF-8."""
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        raise InputError(
            f"byte {error.start + 1} is not UTF-8 (line {line})",
            where=where,
            wanted="save the file as UTF-8",
        ) from None


def read_json(raw: bytes, where: str, *, largest: int = LARGEST) -> Any:
    """Parse one JSON document; ``where`` names it in messages.

    Raises
    ------
    InputError
        Empty, too large, not UTF-8, not JSON, a repeated key, NaN or infinity, nested
        deeper than 64.
    """
    if len(raw) > largest:
        raise InputError(f"{len(raw)} bytes are too many", where=where, wanted=f"at most {largest}")
    text = decoded(raw, where)
    if not text.strip():
        raise InputError("it is empty", where=where, wanted="a JSON object is due")
    _refuse_depth(text, where)
    try:
        return json.loads(
            text,
            object_pairs_hook=lambda pairs: _without_repeats(pairs, where),
            parse_constant=lambda word: _refuse_number(word, where),
            parse_float=lambda digits: _finite(digits, where),
            parse_int=lambda digits: _whole(digits, where),
        )
    except json.JSONDecodeError as error:
        raise InputError(
            f"not JSON at line {error.lineno}, column {error.colno} ({error.msg})", where=where
        ) from None


def _refuse_depth(text: str, where: str) -> None:
    if text.count("[") + text.count("{") <= DEEPEST:
        return
    depth, in_string, escaped = 0, False, False
    for sign in text:
        if in_string:
            escaped, in_string = sign == "\\" and not escaped, escaped or sign != '"'
        elif sign == '"':
            in_string = True
        elif sign in "[{":
            depth += 1
            if depth > DEEPEST:
                raise InputError(f"nested deeper than {DEEPEST}", where=where)
        elif sign in "]}":
            depth -= 1


def _without_repeats(pairs: list[tuple[str, Any]], where: str) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) < len(pairs):
        twice, _ = Counter(key for key, _ in pairs).most_common(1)[0]
        raise InputError(
            f"the key {printable(twice)!r} stands there twice", where=where, wanted="keep one"
        )
    return found


def _refuse_number(word: str, where: str) -> NoReturn:
    raise InputError(f"{word} is not a number", where=where, wanted="leave unknown values out")


def _finite(digits: str, where: str) -> float:
    value = float(digits)
    if not math.isfinite(value):
        _refuse_number(printable(digits), where)
    return value


def _whole(digits: str, where: str) -> int:
    if len(digits) > 300:
        raise InputError(f"a number of {len(digits)} digits", where=where, wanted="it is too large")
    return int(digits)
