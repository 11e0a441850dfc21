"""One line of a trail: its bytes, its hash and what it says."""

import hashlib
import json
import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import UTC, datetime
from typing import Any

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_json import read_json

FORMAT = 1
LONGEST_LINE = 1 << 20
_HASH = re.compile(r"[0-9a-f]{64}")
_RFC_3339 = re.compile(r"\d{4}-\d\d-\d\d[Tt]\d\d:\d\d:\d\d(\.\d+)?([Zz]|[+-]\d\d:\d\d)")
_BYTE_ORDER_MARK = b"\xef\xbb\xbf"


@dataclass(frozen=True, slots=True)
class Line:
    """One line as it stands in the file."""

    hash: str
    """sha256 of ``raw``, in hexadecimal."""
    prev: tuple[str, ...]
    """Hashes of the lines it comes after; none for the first line."""
    at: str
    """RFC 3339 with offset; a claim, used for display alone."""
    by: str
    kind: str
    data: Mapping[str, Any]
    raw: bytes = field(repr=False)
    """The stored bytes without the line end: what is hashed and what a merge copies."""
    number: int = field(default=0, compare=False)
    """Where it stands in the file, from 1."""


def hash_of(raw: bytes) -> str:
    """Return the hash of a line: sha256 over its stored bytes without the line end."""
    return hashlib.sha256(raw).hexdigest()


def without_line_end(raw: bytes) -> bytes:
    """Return the bytes before LF or CRLF."""
    return raw.removesuffix(b"\n").removesuffix(b"\r")


def encoded(prev: tuple[str, ...], at: str, by: str, kind: str, data: Mapping[str, Any]) -> bytes:
    """Return the bytes of a new line, without its line end.

    Text stays readable in an editor; only what an editor cannot show (control and
    direction characters, halves of surrogate pairs) is spelled as a JSON escape.

    Raises
    ------
    InputError
        Where ``data`` is not JSON (a NaN, an object of another type), the line is longer
        than 1 MiB or nested too deeply, or ``at`` is no time: whatever is written can be read.
    """
    named = list(prev) if len(prev) > 1 else (prev[0] if prev else None)
    said = {"prev": named, "at": at, "by": by, "kind": kind, "data": data}
    try:
        text = json.dumps(said, ensure_ascii=False, allow_nan=False)
    except (TypeError, ValueError) as error:
        raise InputError(f"the {printable(kind)} line cannot be written ({error})") from None
    if not text.isprintable():
        text = "".join(c if c.isprintable() else json.dumps(c)[1:-1] for c in text)
    raw = text.encode("utf-8")
    parsed(raw)
    if instant(at) is None:
        raise InputError(
            f"{printable(at)!r} is no time", wanted="such as 2026-06-03T18:20:00+02:00"
        )
    return raw


def parsed(raw: bytes, number: int = 0) -> Line:
    """Read one line, given without its line end.

    Raises
    ------
    InputError
        Not JSON, too long, nested too deeply, a repeated or missing key, a value of the
        wrong type. ``str(error)`` says what is wrong with the line, not where it stands.
    """
    if raw.startswith(_BYTE_ORDER_MARK):
        raise InputError("it begins with a byte order mark")
    said = read_json(raw, "", largest=LONGEST_LINE)
    if not isinstance(said, dict):
        raise InputError("it is not a JSON object")
    try:
        prev, at, by, kind, data = (
            said["prev"], said["at"], said["by"], said["kind"], said["data"],
        )  # fmt: skip
    except KeyError as missing:
        raise InputError(f"the key {missing} is missing") from None
    if not (isinstance(at, str) and _RFC_3339.fullmatch(at)):
        raise InputError("'at' is no time", wanted="RFC 3339 with seconds and offset")
    if not (isinstance(by, str) and isinstance(kind, str) and isinstance(data, dict)):
        raise InputError("'by' and 'kind' are text and 'data' is an object")
    return Line(hash_of(raw), _named(prev), at, by, kind, data, raw, number)


def _named(prev: Any) -> tuple[str, ...]:
    if prev is None:
        return ()
    several = isinstance(prev, list)
    names = tuple(prev) if several else (prev,)
    if not all(isinstance(name, str) and _HASH.fullmatch(name) for name in names):
        raise InputError("'prev' names no line", wanted="64 hexadecimal digits in small letters")
    if several and (len(names) < 2 or list(names) != sorted(set(names))):
        raise InputError("'prev' is a list", wanted="two or more different hashes, sorted")
    return names


def instant(at: str) -> datetime | None:
    """Return the moment that ``at`` names, or None where the calendar has no such moment."""
    if not _RFC_3339.fullmatch(at):
        return None
    try:
        return datetime.fromisoformat(at.upper()).astimezone(UTC)
    except (ValueError, OverflowError):
        return None
