"""The published JSON Schemas, made from the dataclasses that are read and printed."""

from collections.abc import Callable, Mapping
from typing import Any, Final

from pydantic import TypeAdapter

from roughness.assessment.back_calculating import FoundN
from roughness.assessment.cross_checking import CrossChecked
from roughness.assessment.estimate import Estimate
from roughness.assessment.section_document import SectionFlow
from roughness.commands.documents import CheckDocument, Listed, MergeDocument
from roughness.comparison.stream_files import StreamFileShape
from roughness.exports.columns import COLUMNS
from roughness.findings import Finding, rule_table
from roughness.handbook.toml_shape import HandbookShape
from roughness.hydraulics.composite_relations import RELATIONS
from roughness.survey.choices import Judgement
from roughness.survey.cross_check import CrossCheck
from roughness.survey.measured_flow import MeasuredFlow
from roughness.survey.sections import Section
from roughness.trail.kinds import trail_schema

_DIALECT: Final = {"$schema": "https://json-schema.org/draft/2020-12/schema"}
# Not part of the printed document, or there only where bed and banks are told apart.
_OPTIONAL: Final = ("segments", "composite_n")


def _of(kind: Any, title: str) -> dict[str, Any]:
    return _DIALECT | TypeAdapter(kind).json_schema() | {"title": title}


def _estimate() -> dict[str, Any]:
    return _of(Judgement, "Input of `roughness estimate` and `roughness record`") | {
        "description": "`record` takes three keys more: part and condition (both due) and visit."
    }


def _estimate_output() -> dict[str, Any]:
    schema = _of(Estimate, "What `roughness estimate` prints")
    del schema["properties"]["judgement"]
    schema["required"] = [name for name in schema["properties"] if name not in _OPTIONAL]
    for name in _OPTIONAL:
        del schema["properties"][name]["default"]
    numbers = schema["$defs"]["Spread"]["properties"]
    schema["$defs"]["Spread"]["properties"] = {name: {"type": "number"} for name in numbers}
    return _only_used(schema)


def _cross_check_output() -> dict[str, Any]:
    schema = _of(CrossChecked, "What `roughness crosscheck` prints")
    # Only where stones were counted.
    schema["properties"]["pebble_count"] = {"$ref": "#/$defs/PebbleCount"}
    return schema


def _only_used(schema: dict[str, Any]) -> dict[str, Any]:
    """Return the schema without definitions that nothing refers to."""
    kept: dict[str, Any] = {}
    todo = [{key: value for key, value in schema.items() if key != "$defs"}]
    while todo:
        text = str(todo.pop())
        for name, definition in schema["$defs"].items():
            if f"'#/$defs/{name}'" in text and name not in kept:
                kept[name] = definition
                todo.append(definition)
    return schema | {"$defs": kept}


def _section_output() -> dict[str, Any]:
    relations = {
        key: {"assumption": relation.assumption, "source": relation.source}
        for key, relation in RELATIONS.items()
    }
    return _of(SectionFlow, "What `roughness section` prints") | {
        "description": "low and high are there where an n has a range, composite_n where there is"
        " one part; `relations` says what each composite n assumes.",
        "relations": relations,
    }


def _export() -> dict[str, Any]:
    types = {"string": ["string", "null"], "number": ["number", "null"]}
    cells = {
        column.name: {
            "type": types.get(column.type, ["number", "string", "null"]),
            "description": column.description,
        }
        for column in COLUMNS
    }
    row = {"type": "object", "properties": cells, "required": list(cells)}
    return _DIALECT | {
        "title": "What `roughness export -o FILE.json` writes",
        "type": "object",
        "properties": {
            "about": {"type": "object", "description": "survey, cautions, handbooks, columns"},
            "rows": {"type": "array", "items": row},
        },
        "required": ["about", "rows"],
    }


def _findings() -> dict[str, Any]:
    words = [
        {"key": rule.key, "level": rule.level, "meaning": rule.meaning, "source": rule.source}
        for rule in rule_table()
    ]
    return _of(tuple[Finding, ...], "Findings, worst first") | {
        "description": "`rules` lists what is judged, and after whom; what is wrong with the"
        " files of a survey has rules of its own.",
        "rules": words,
    }


SCHEMAS: Final[Mapping[str, Callable[[], dict[str, Any]]]] = {
    "estimate": _estimate,
    "estimate-output": _estimate_output,
    "crosscheck": lambda: _of(CrossCheck, "Input of `roughness crosscheck`"),
    "crosscheck-output": _cross_check_output,
    "backcalc": lambda: _of(MeasuredFlow, "Input of `roughness backcalc`"),
    "backcalc-output": lambda: _of(FoundN, "What `roughness backcalc` prints"),
    "section": lambda: _of(Section, "Input of `roughness section`"),
    "section-output": _section_output,
    "trail": trail_schema,
    "list": lambda: _of(tuple[Listed, ...], "What `roughness list --json` prints"),
    "check": lambda: _of(CheckDocument, "What `roughness check --json` prints"),
    "merge": lambda: _of(MergeDocument, "What `roughness merge --json` prints"),
    "export": _export,
    "handbook": lambda: _of(HandbookShape, "A handbook file (TOML)"),
    "measured-streams": lambda: _of(StreamFileShape, "A file of measured streams (TOML)"),
    "findings": _findings,
}
