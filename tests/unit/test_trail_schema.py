"""The published schema of a line, and what is loaded for what."""

import json
import subprocess
import sys

import pytest

from roughness.trail.kinds import KINDS_OF_REACH, KINDS_OF_SURVEY, trail_schema


def test_the_schema_describes_every_known_kind_and_resolves() -> None:
    schema = trail_schema()
    text = json.dumps(schema)
    kinds = {one["properties"]["kind"].get("const") for one in schema["anyOf"]}
    assert kinds - {None} == KINDS_OF_SURVEY.keys() | KINDS_OF_REACH.keys()
    named = {part.split('"')[0] for part in text.split('"#/$defs/')[1:]}
    assert named <= schema["$defs"].keys()
    for word in (
        "perimeter_percent",
        "blocked_percent",
        "first_line",
        "dependence",
        "carried_from",
    ):
        assert word in text


def test_the_schema_asks_for_all_five_keys_of_a_line() -> None:
    for one in trail_schema()["anyOf"]:
        assert one["required"] == ["prev", "at", "by", "kind", "data"]


@pytest.mark.parametrize(
    "module", ["reading", "locking", "writing", "ordering", "naming", "presence"]
)
def test_reading_and_locking_load_neither_pydantic_nor_numpy(module: str) -> None:
    code = (
        f"import sys, roughness.trail.{module}; print({{'pydantic', 'numpy'}} & set(sys.modules))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "set()"
