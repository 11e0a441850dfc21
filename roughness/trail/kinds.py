"""The published kinds of lines: how the data of each is read, and its JSON Schema."""

import json
from collections.abc import Mapping
from copy import deepcopy
from functools import cache
from typing import Any, Final

from pydantic import TypeAdapter, ValidationError

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.survey.stream import FlowCondition, Part, Visit
from roughness.trail import data as said
from roughness.trail import review_data as review

KINDS_OF_SURVEY: Final[dict[str, tuple[type, ...]]] = {
    "begin": (said.BeginSurvey,),
    "describe": (said.DescribeSurvey,),
    "flow-condition": (FlowCondition,),
    "reach": (said.NotedReach,),
    "order": (said.Order,),
    "heads": (said.Heads,),
    "withdraw": (said.Withdraw,),
    "merge": (review.Merge,),
}
KINDS_OF_REACH: Final[dict[str, tuple[type, ...]]] = {
    "begin": (said.BeginReach,),
    "describe": (said.DescribeReach,),
    "part": (Part,),
    "visit": (Visit,),
    "gate": (said.Gate,),
    "choose": (
        said.ChooseBase,
        said.ChooseShape,
        said.ChooseObstruction,
        said.ChooseVegetation,
        said.ChooseMeander,
    ),
    "estimate": (said.Estimated,),
    "adopt": (said.Adopt,),
    "question": (review.Question,),
    "answer": (review.Answer,),
    "finding-answered": (review.FindingAnswered,),
    "accept": (review.Accept,),
    "return": (review.Return,),
    "opinion": (review.Opinion,),
    "consensus": (review.Consensus,),
    "evidence": (review.Evidence,),
    "withdraw": (said.Withdraw,),
    "merge": (review.Merge,),
}
_CHOOSE_BY_FACTOR: Final[dict[str, type]] = {
    "base": said.ChooseBase,
    "irregularity": said.ChooseShape,
    "variation": said.ChooseShape,
    "obstruction": said.ChooseObstruction,
    "vegetation": said.ChooseVegetation,
    "meander": said.ChooseMeander,
}


def kinds_of(is_of_reach: bool) -> Mapping[str, tuple[type, ...]]:
    """Return the known kinds of a reach's trail, or of the survey's own."""
    return KINDS_OF_REACH if is_of_reach else KINDS_OF_SURVEY


def read_data(
    is_of_reach: bool, kind: str, data: Mapping[str, Any], *, keep_unknown: bool = False
) -> Any:
    """Return the data of a line of a known kind as its dataclass.

    Parameters
    ----------
    is_of_reach : bool
        Whether the line belongs to a reach's trail.
    kind, data
        What the line says.
    keep_unknown : bool
        Whether keys that a newer version may have added are passed over (they stay in the
        line) instead of refused. Reading does so, writing does not.

    Raises
    ------
    InputError
        Where the data does not fit the kind's schema; names the first place.
    """
    adapter = _adapter(_type_of(is_of_reach, kind, data))
    try:
        # Strictness is JSON's here: arrays become tuples, but no text becomes a number.
        return adapter.validate_json(json.dumps(data))
    except (TypeError, ValueError) as error:
        if not isinstance(error, ValidationError):
            raise InputError(f"{error}", where=f"the {kind} line") from None
        problems = error.errors(include_url=False, include_input=False)
    unknown = [p["loc"] for p in problems if p["type"] in _UNKNOWN_KEY]
    if not keep_unknown or len(unknown) < len(problems):
        first = next((p for p in problems if p["type"] not in _UNKNOWN_KEY), problems[0])
        raise InputError(_sentence(first["loc"], first["msg"]), where=f"the {kind} line")
    return read_data(is_of_reach, kind, _without(data, unknown), keep_unknown=False)


def trail_schema() -> dict[str, Any]:
    """Return the JSON Schema of a line of any trail, with the data of every known kind."""
    types = [t for kinds in (KINDS_OF_SURVEY, KINDS_OF_REACH) for ts in kinds.values() for t in ts]
    refs, shared = TypeAdapter.json_schemas([(t, "validation", _adapter(t)) for t in types])
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": "A line of a trail",
        "description": "One JSON object a line. The hash of a line is the sha256 of its bytes"
        " without the line end. Kinds that are not listed here are kept as they are.",
        "anyOf": [
            _line_schema(
                f"a line of {where} of kind {kind}",
                {"const": kind},
                _one_of([refs[(t, "validation")] for t in types]),
            )
            for where, kinds in (
                ("survey.jsonl", KINDS_OF_SURVEY),
                ("reaches/NAME.jsonl", KINDS_OF_REACH),
            )
            for kind, types in kinds.items()
            if not (where.startswith("reaches") and kind in _IN_BOTH)
        ]
        + [
            _line_schema(
                "a line of a kind that is not known here",
                {"type": "string", "not": {"enum": sorted(KINDS_OF_SURVEY | KINDS_OF_REACH)}},
                {"type": "object"},
            )
        ],
        "$defs": shared["$defs"],
    }


# The same in the survey's trail and in a reach's: published once.
_IN_BOTH = ("withdraw", "merge")
_UNKNOWN_KEY = ("extra_forbidden", "unexpected_keyword_argument")


@cache
def _adapter(of: type) -> TypeAdapter[Any]:
    return TypeAdapter(of)


def _type_of(is_of_reach: bool, kind: str, data: Mapping[str, Any]) -> type:
    types = kinds_of(is_of_reach)[kind]
    if len(types) == 1:
        return types[0]
    factor = data.get("factor")
    if not isinstance(factor, str) or factor not in _CHOOSE_BY_FACTOR:
        raise InputError(
            f"{printable(str(factor))!r} is no factor",
            where=f"the {kind} line",
            wanted=f"one of {', '.join(_CHOOSE_BY_FACTOR)}",
        )
    return _CHOOSE_BY_FACTOR[factor]


def _without(data: Mapping[str, Any], places: list[tuple[int | str, ...]]) -> dict[str, Any]:
    copy: Any = deepcopy(dict(data))
    for place in places:
        inner = copy
        for step in place[:-1]:
            inner = inner[step]
        del inner[place[-1]]
    known: dict[str, Any] = copy
    return known


def _sentence(place: tuple[int | str, ...], message: str) -> str:
    named = ".".join(str(step) for step in place)
    return printable(f"{named}: {message[:1].lower()}{message[1:]}" if named else message)


def _one_of(schemas: list[dict[str, Any]]) -> dict[str, Any]:
    return schemas[0] if len(schemas) == 1 else {"oneOf": schemas}


def _line_schema(title: str, kind: dict[str, Any], data: dict[str, Any]) -> dict[str, Any]:
    hashed = {"type": "string", "pattern": "^[0-9a-f]{64}$"}
    return {
        "title": title,
        "type": "object",
        "properties": {
            "prev": {
                "oneOf": [
                    {"type": "null"},
                    hashed,
                    {"type": "array", "items": hashed, "minItems": 2, "uniqueItems": True},
                ]
            },
            "at": {"type": "string", "format": "date-time"},
            "by": {"type": "string"},
            "kind": kind,
            "data": data,
        },
        "required": ["prev", "at", "by", "kind", "data"],
    }
