"""Composite n of two worked sections.

Formulas: Horton 1933 and Einstein 1934; Pavlovskii 1931, Muehlhofer 1933 and Einstein and
Banks 1950; weighting by wetted perimeter. The values were derived from those formulas with 40
digits by another program than this one; the hand steps of the first section are below.
"""

from collections.abc import Callable
from typing import Any

import pytest

from roughness.hydraulics import horton_einstein, pavlovskii, perimeter_mean

OVERBANK = ([0.08, 0.03, 0.06], [21, 14, 21])
TRAPEZOID = ([0.05, 0.03, 0.08], [3.3541019662496847, 6.0, 3.3541019662496847])


@pytest.mark.parametrize(
    ("relation", "section", "expected"),
    [
        (horton_einstein, OVERBANK, 0.0616186761353),
        (pavlovskii, OVERBANK, 0.0630476010646),
        (perimeter_mean, OVERBANK, 0.06),
        (horton_einstein, TRAPEZOID, 0.0505823689125),
        (pavlovskii, TRAPEZOID, 0.0526679917953),
        (perimeter_mean, TRAPEZOID, 0.048475241575),
    ],
)
def test_composite_n_of_a_worked_section(
    relation: Callable[..., Any], section: tuple[list[float], list[float]], expected: float
) -> None:
    assert relation(*section) == pytest.approx(expected, rel=1e-11)


def test_hand_steps_of_the_overbank_section() -> None:
    # 0.475176 + 0.0727461 + 0.308636 = 0.856558; / 56 = 0.0152957
    assert horton_einstein(*OVERBANK) ** 1.5 == pytest.approx(0.0152957, abs=5e-8)
    # 0.1344 + 0.0126 + 0.0756 = 0.2226; / 56 = 0.003975
    assert pavlovskii(*OVERBANK) ** 2 == pytest.approx(0.003975, abs=1e-12)
