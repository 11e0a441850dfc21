"""What experienced people differ by when they judge n of one reach.

Published: US Army Corps of Engineers 1986, Research Document 26, estimates of n by trained
engineers, lognormal, sd = n sqrt(exp(sigma^2) - 1) with sigma = 0.582 + 0.10 ln n. The
examples below are from memory, not read in the source, as is the relation.
"""

import math

import pytest
from mpmath import mp, mpf

from roughness import additive

EXAMPLES = [
    (0.02, 0.0039),
    (0.03, 0.0070),
    (0.04, 0.0106),
    (0.05, 0.0144),
    (0.07, 0.0227),
    (0.10, 0.0363),
    (0.15, 0.0612),
]


@pytest.mark.parametrize(("n", "sd"), EXAMPLES)
def test_the_standard_deviation_is_the_published_one(n: float, sd: float) -> None:
    found = additive.sd_of_people(n)
    # Printed with four decimals: half a unit of the last one.
    assert found is not None and abs(found - sd) <= 0.00005 + 1e-12


@pytest.mark.parametrize("n", [n for n, _ in EXAMPLES])
def test_it_is_that_of_the_lognormal_with_this_mean_integrated(n: float) -> None:
    with mp.workdps(30):
        sigma = mpf("0.582") + mpf("0.10") * mp.log(mpf(n))
        middle = mp.log(mpf(n)) - sigma**2 / 2

        def moment(power: int) -> mpf:
            def density(z: mpf) -> mpf:
                return mp.exp(power * (middle + sigma * z)) * mp.npdf(z)

            return mp.quad(density, [-12, -4, 0, 4, 12])

        exact = float(mp.sqrt(moment(2) - moment(1) ** 2))
        mean = float(moment(1))
    found = additive.sd_of_people(n)
    assert found is not None
    assert math.isclose(found, exact, rel_tol=1e-9)
    assert math.isclose(mean, n, rel_tol=1e-12)


@pytest.mark.parametrize("n", [0.0, -1.0, 0.001, 0.00296])
def test_where_the_relation_has_no_spread_left_nothing_is_said(n: float) -> None:
    assert additive.sd_of_people(n) is None
    assert additive.sigma_of_people(n) is None
