"""An estimate's input text read into a :class:`Judgement`, or refused in one sentence."""

import json
from dataclasses import fields, is_dataclass
from functools import cache
from types import UnionType
from typing import Any, Union, get_args, get_origin, get_type_hints

from pydantic import TypeAdapter, ValidationError

from roughness.errors import InputError
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.printing import enumerate_words
from roughness.quantities.strict_json import read_json
from roughness.survey.choices import Judgement

# `record` files the same document under a part and a flow condition.
FILED_UNDER = ("part", "condition", "visit")
_RESERVED = {"stems": "counted stems are not supported yet; choose a vegetation grade"}


@cache
def _adapter(kind: type) -> TypeAdapter[Any]:
    return TypeAdapter(kind)


def read_judgement(raw: bytes, where: str) -> Judgement:
    """Read the JSON text of one estimate; ``where`` names it in messages.

    Raises
    ------
    InputError
        For anything that is not such a document: one sentence with the field.
    """
    return judgement_from(read_json(raw, where), where)


def judgement_from(document: Any, where: str) -> Judgement:
    """Read a parsed JSON document; the keys ``part``, ``condition`` and ``visit`` may stand in it.

    Raises
    ------
    InputError
        As :func:`read_judgement`.
    """
    if not isinstance(document, dict):
        raise InputError("no JSON object", where=where, wanted='it starts with {"handbook": ...')
    body = {key: value for key, value in document.items() if key not in FILED_UNDER}
    judgement = read_strictly(Judgement, body, where)
    assert isinstance(judgement, Judgement)
    return judgement


def read_strictly(kind: type, document: Any, where: str) -> Any:
    """Return ``document`` as the dataclass ``kind``: no unknown keys, no text for numbers.

    Raises
    ------
    InputError
        Names the first field that is wrong and what would be right.
    """
    try:
        # JSON's own strict rules let a list be a tuple and refuse true for 1.
        return _adapter(kind).validate_json(json.dumps(document))
    except ValidationError as error:
        raise _in_one_sentence(kind, error, where) from None


def _in_one_sentence(kind: type, error: ValidationError, where: str) -> InputError:
    first = error.errors(include_url=False)[0]
    path = [str(step) for step in first["loc"]]
    field, met = ".".join(path), first.get("input")
    place = f"{where}: {printable(field)}" if field else where
    if first["type"] == "json_invalid":
        return InputError(
            "a text holds half of a surrogate pair", where=where, wanted="write the whole sign"
        )
    if first["type"] in ("unexpected_keyword_argument", "extra_forbidden"):
        return _unknown_key(kind, path, where)
    if first["type"] in ("missing", "missing_argument"):
        return InputError("it is missing", where=place, wanted=_wanted(kind, path))
    if first["type"] == "literal_error":
        words = [word for word in get_args(_plain(_type_at(kind, path))) if isinstance(word, str)]
        hint = nearest(met, words) if isinstance(met, str) else ""
        known = f"one of {', '.join(words)}"
        return InputError(
            f"{_shown(met)} is not known here",
            where=place,
            wanted=f"{hint}; {known}" if hint else known,
        )
    return InputError(f"{_shown(met)} does not fit", where=place, wanted=_wanted(kind, path, met))


def _unknown_key(kind: type, path: list[str], where: str) -> InputError:
    key, owner = path[-1], ".".join(path[:-1])
    place = f"{where}: {owner}" if owner else where
    if key in _RESERVED:
        return InputError(_RESERVED[key], where=place)
    holder = _plain(_type_at(kind, path[:-1]))
    known = _keys_of(holder) if is_dataclass(holder) else []
    hint = nearest(key, known)
    listed = f"known are {enumerate_words(known)}"
    return InputError(
        f"the key {printable(key)!r} is not known",
        where=place,
        wanted=f"{hint}; {listed}" if hint else listed,
    )


def _type_at(kind: Any, path: list[str]) -> Any:
    """Return the type that the schema has at ``path``; ``object`` where it has none."""
    for step in path:
        kind = _plain(kind)
        if is_dataclass(kind):
            hints = get_type_hints(kind)
            kind = hints.get(step, hints.get(f"{step}_", object))
        elif get_origin(kind) is tuple:
            kind = get_args(kind)[0]
        else:
            return object
    return kind


def _plain(kind: Any) -> Any:
    """Return ``X`` for ``X | None``."""
    if get_origin(kind) in (Union, UnionType):
        return next(arm for arm in get_args(kind) if arm is not type(None))
    return kind


def _wanted(kind: type, path: list[str], met: Any = None) -> str:
    due = _plain(_type_at(kind, path))
    if due is float:
        comma = isinstance(met, str) and "," in met and met.replace(",", ".", 1)
        return f"write it as a number with a point: {comma}" if comma else "a number is due"
    if due is bool:
        return "true or false is due"
    if due is str:
        return "a text in quotes is due"
    if is_dataclass(due):
        return f"an object with {enumerate_words(_keys_of(due)[:6], 'or')} is due"
    if get_origin(due) is tuple:
        return "a list is due"
    words = [str(word) for word in get_args(due)]
    return f"one of {', '.join(words)}" if words else "see `roughness schema estimate`"


def _keys_of(kind: Any) -> list[str]:
    """Return the keys as they are written; a field that Python reserves ends in ``_``."""
    return [f.name.removesuffix("_") for f in fields(kind)]


def _shown(met: Any) -> str:
    text = json.dumps(met, ensure_ascii=False)
    return printable(text if len(text) <= 60 else f"{text[:57]}...")
