"""Published n of channel types: least, usual and greatest, looked up by words."""

import json
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar, Final

from pydantic import TypeAdapter, ValidationError

from roughness.errors import InputError, UnknownNameError
from roughness.quantities.foreign_text import nearest, printable, same_name_key
from roughness.quantities.strict_json import read_json
from roughness.survey.words import Setting

_STRICT: Final[dict[str, Any]] = {"extra": "forbid", "strict": True, "allow_inf_nan": False}
_SHOWN: Final = 5


@dataclass(frozen=True, kw_only=True)
class ChannelType:
    """One row of the table."""

    __pydantic_config__: ClassVar[dict[str, Any]] = _STRICT

    key: str
    group: str
    name: str
    """What the channel is like, in our own words."""
    setting: Setting
    low: float
    normal: float | None
    """The usual value; None where the publication gives none."""
    high: float
    provenance: str
    note: str | None = None
    """Where copies of the table differ."""

    @property
    def label(self) -> str:
        """Group and name, as messages and the search show them."""
        return f"{self.group}: {self.name}"


@dataclass(frozen=True, kw_only=True)
class ChannelTypes:
    """The table with its citation."""

    __pydantic_config__: ClassVar[dict[str, Any]] = _STRICT

    key: str
    citation: str
    provenance: str
    notes: tuple[str, ...]
    rows: tuple[ChannelType, ...]

    def find(self, words: str) -> tuple[ChannelType, ...]:
        """Return the rows that hold all of ``words``, in the order of the table.

        Parameters
        ----------
        words : str
            A row's key, or words of its group and name in any order; beginnings of words do.
        """
        asked = same_name_key(words)
        exact = tuple(row for row in self.rows if row.key == asked)
        if exact or not (parts := _words(asked)):
            return exact
        return tuple(row for row in self.rows if _holds(row, parts))

    def one(self, words: str, where: str = "") -> ChannelType:
        """Return the one row that ``words`` name.

        Raises
        ------
        UnknownNameError
            Where no row has them, with the nearest key.
        InputError
            Where several have them, naming their keys.
        """
        found = self.find(words)
        if not found:
            hint = nearest(words, [row.key for row in self.rows])
            raise UnknownNameError(
                f"no channel type is called {printable(words)!r}",
                where=where,
                wanted=hint or f"`roughness tables {self.key}` prints them all",
            )
        if len(found) > 1:
            raise InputError(
                f"{printable(words)!r} fits {len(found)} channel types",
                where=where,
                wanted=f"name one of {_listed([row.key for row in found])}; "
                f"`roughness tables {self.key}` prints them",
            )
        return found[0]


def parse_channel_types(raw: bytes, where: str) -> ChannelTypes:
    """Read a table of channel types from JSON.

    Raises
    ------
    InputError
        Where it is none, its rows are out of order (low, normal, high) or a key comes twice.
    """
    document = read_json(raw, where)
    try:
        table = TypeAdapter(ChannelTypes).validate_json(json.dumps(document))
    except ValidationError as error:
        first = error.errors(include_url=False)[0]
        place = ".".join(str(step) for step in first["loc"])
        raise InputError(str(first["msg"]), where=f"{where}: {place}") from None
    for row in table.rows:
        middle = row.low if row.normal is None else row.normal
        if not 0 < row.low <= middle <= row.high:
            raise InputError(f"the row {row.key} is not in order", where=where)
    if len({row.key for row in table.rows}) < len(table.rows):
        raise InputError("a key stands there twice", where=where)
    return table


def _words(text: str) -> list[str]:
    return "".join(sign if sign.isalnum() else " " for sign in text.casefold()).split()


def _holds(row: ChannelType, parts: Sequence[str]) -> bool:
    own = _words(f"{row.key} {row.label} {row.setting}")
    return all(any(word.startswith(part) for word in own) for part in parts)


def _listed(names: Sequence[str]) -> str:
    once = list(dict.fromkeys(names))
    more = f" and {len(once) - _SHOWN} more" if len(once) > _SHOWN else ""
    return ", ".join(once[:_SHOWN]) + more
