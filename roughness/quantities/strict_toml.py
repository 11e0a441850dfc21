"""TOML read strictly: UTF-8, not too large, and one sentence with the line where it is none."""

import re
import tomllib
from typing import Any, Final

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.strict_json import decoded

LARGEST: Final = 1 << 20
_AT = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")


def read_toml(raw: bytes, where: str, *, due: str, largest: int = LARGEST) -> dict[str, Any]:
    """Parse one TOML document.

    Parameters
    ----------
    raw : bytes
        The file: UTF-8, at most ``largest`` bytes.
    where : str
        Names it in messages; may be empty, the message's ``where`` is then the line alone.
    due : str
        What should stand in it, for messages: ``a handbook in TOML``.

    Raises
    ------
    InputError
        Too large, not UTF-8, empty, or not TOML: where it stops being so.
    """
    if len(raw) > largest:
        raise InputError("it is too large", where=where, wanted=f"at most {largest} bytes are due")
    text = decoded(raw, where)
    if not text.strip():
        raise InputError("it is empty", where=where, wanted=f"{due} is due")
    try:
        return tomllib.loads(text)
    except RecursionError:
        raise InputError("it is nested too deep", where=where, wanted=f"{due} is due") from None
    except tomllib.TOMLDecodeError as error:
        raise _not_toml(str(error), text, where) from None
    except ValueError:
        # Python reads no whole number of thousands of digits, and TOML names no place for it.
        raise InputError(
            "it holds a number of thousands of digits", where=where, wanted="shorten it"
        ) from None


def _not_toml(message: str, text: str, where: str) -> InputError:
    match = _AT.search(message)
    if match is None:
        return InputError(
            f"not TOML ({printable(message)})", where=where, wanted="correct the file"
        )
    lines = text.rstrip("\n").split("\n")
    line, column = match[1] or len(lines), match[2] or len(lines[-1]) + 1
    place = f"line {line}, column {column}"
    return InputError(
        f"not TOML ({printable(message[: match.start()])})",
        where=f"{where}: {place}" if where else place,
        wanted="correct that line",
    )
