"""The guide's page on other roads to n names every method with its mark."""

from pathlib import Path

import pytest

import roughness
from roughness.comparison import METHODS, Method
from roughness.desk.cross_checking import channel_types

PAGE = (Path(roughness.__file__).parent / "guide" / "other-roads.md").read_text(encoding="utf-8")


@pytest.mark.parametrize("method", METHODS, ids=lambda m: m.key)
def test_every_method_is_in_the_guide_with_what_it_includes_and_how_it_is_known(
    method: Method,
) -> None:
    (row,) = [line for line in PAGE.splitlines() if line.startswith(f"| `{method.key}` ")]
    assert f"| {method.includes} |" in row
    assert row.endswith(f"*{method.provenance}* |") and method.source in row
    if method.error_percent is not None:
        assert f"error {method.error_percent:g} %" in row
    for limit in method.limits:
        assert limit.words(float("nan")).split("(")[1].split(")")[0] in row


def test_the_number_of_channel_types_is_the_true_one() -> None:
    assert f"{len(channel_types().rows)} types" in PAGE
