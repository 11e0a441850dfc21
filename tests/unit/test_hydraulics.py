"""Composite n within a part, and depth against n in a wide channel."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from roughness.errors import InputError
from roughness.hydraulics import (
    horton_einstein,
    pavlovskii,
    perimeter_mean,
    stage_change_wide,
)

RELATIONS = (horton_einstein, pavlovskii, perimeter_mean)


@pytest.mark.parametrize("relation", RELATIONS)
def test_segments_of_one_n_have_that_n(relation: Callable[..., Any]) -> None:
    assert relation([0.03, 0.03], [1, 9]) == pytest.approx(0.03)


def test_only_ratios_of_perimeter_count() -> None:
    assert horton_einstein([0.03, 0.06], [3, 1]) == pytest.approx(
        horton_einstein([0.03, 0.06], [75, 25]), rel=1e-15
    )


def test_leading_axes_are_kept() -> None:
    n = np.full((4, 5, 2), 0.03)
    assert horton_einstein(n, [1, 2]).shape == (4, 5)
    assert type(horton_einstein([0.03, 0.04], [1, 2])) is float


def test_relations_come_in_their_known_order() -> None:
    # Power means of the same weights with powers 1, 1.5 and 2.
    n, perimeter = [0.03, 0.05, 0.08], [6.0, 3.4, 3.4]
    by_rule = [relation(n, perimeter) for relation in (perimeter_mean, horton_einstein, pavlovskii)]
    assert 0.03 < by_rule[0] < by_rule[1] < by_rule[2] < 0.08


@pytest.mark.parametrize("perimeter", [[0, 0], [-1, 2], [float("nan"), 1]])
def test_perimeters_that_cannot_be_used_are_refused(perimeter: list[float]) -> None:
    with pytest.raises(InputError, match="wetted perimeters"):
        horton_einstein([0.03, 0.04], perimeter)


def test_a_fifth_more_n_is_an_eighth_more_depth() -> None:
    # h ~ n^0.6 at the same discharge and slope, derived from Manning's equation per metre of
    # width: 1.2^0.6 = 1.1156.
    assert stage_change_wide(2.0, 0.03, 0.036) == pytest.approx(2 * 0.1156, abs=1e-4)


def test_the_new_depth_carries_the_same_discharge() -> None:
    depth = 1.7 + stage_change_wide(1.7, 0.035, 0.061)
    assert depth ** (5 / 3) / 0.061 == pytest.approx(1.7 ** (5 / 3) / 0.035, rel=1e-13)


def test_depths_in_columns_change_in_columns() -> None:
    assert stage_change_wide([1.0, 2.0], 0.03, [0.03, 0.02]).tolist() == pytest.approx(
        [0.0, 2 * ((2 / 3) ** 0.6 - 1)]
    )
