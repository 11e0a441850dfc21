"""The percentiles against the exact distribution, computed here another way.

The Laplace transform of a sum of independent triangular and uniform factors is a sum of
exponentials over a power of s; its distribution function is therefore a sum of truncated
powers (textbook mathematics; for equal uniform factors the Irwin-Hall distribution). With a
multiplier the powers are integrated in closed form against its density. The sums cancel
heavily and are taken with 120 digits, so nothing here is shared with the program.

A percentile q is right to 1e-6 when F(q - 1e-6) <= p <= F(q + 1e-6).
"""

import math
import random
from collections import defaultdict
from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from mpmath import mp, mpf

from roughness.additive import quantiles, spread

DIGITS = 120
WITHIN = 1e-6
P = (0.05, 0.16, 0.50, 0.84, 0.95)
POINT = (0.0, 0.0, 0.0, "triangular")
ONE = (1.0, 1.0, 1.0, "triangular")
Factor = tuple[float, float, float, str]


@pytest.fixture(autouse=True)
def many_digits() -> Any:
    before, mp.dps = mp.dps, DIGITS
    yield
    mp.dps = before


def transform(factor: Factor) -> list[tuple[mpf, mpf, int]]:
    """Terms (C, t, k) of the density's Laplace transform: sum of C exp(-t s) / s^k."""
    a, c, b, shape = mpf(factor[0]), mpf(factor[1]), mpf(factor[2]), factor[3]
    w = b - a
    if w == 0:
        return [(mpf(1), a, 0)]
    if shape == "uniform":
        return [(1 / w, a, 1), (-1 / w, b, 1)]
    if c == a:
        return [(2 / w, a, 1), (-2 / w**2, a, 2), (2 / w**2, b, 2)]
    if c == b:
        return [(2 / w**2, a, 2), (-2 / w**2, b, 2), (-2 / w, b, 1)]
    return [(2 / (w * (c - a)), a, 2), (-2 / ((c - a) * (b - c)), c, 2), (2 / (w * (b - c)), b, 2)]


def powers_of_sum(factors: list[Factor]) -> list[tuple[mpf, mpf, int]]:
    """F of the sum as terms (C, t, k): sum of C max(x - t, 0)^k / k!."""
    total: dict[tuple[mpf, int], mpf] = {(mpf(0), 0): mpf(1)}
    for factor in factors:
        grown: dict[tuple[mpf, int], mpf] = defaultdict(mpf)
        for (t, k), c in total.items():
            for c2, t2, k2 in transform(factor):
                grown[t + t2, k + k2] += c * c2
        total = grown
    return [(c, t, k) for (t, k), c in total.items() if c]


def density_pieces(m: Factor) -> list[tuple[mpf, mpf, mpf, mpf]]:
    """Pieces (from, to, alpha, beta) of the multiplier's density alpha + beta m."""
    a, c, b = (mpf(v) for v in m[:3])
    if m[3] == "uniform":
        return [(a, b, 1 / (b - a), mpf(0))]
    up = 2 / ((b - a) * (c - a)) if c > a else mpf(0)
    down = 2 / ((b - a) * (b - c)) if b > c else mpf(0)
    return [p for p in ((a, c, -a * up, up), (c, b, b * down, -down)) if p[1] > p[0]]


def moment(start: mpf, end: mpf, power: int) -> mpf:
    if power == -1:
        return mp.log(end / start)
    return (end ** (power + 1) - start ** (power + 1)) / (power + 1)


def independent(factors: list[Factor], x: float) -> mpf:
    """P(n <= x) for independent factors, exact up to the last of the digits."""
    terms, m = powers_of_sum(factors[:5]), factors[5]
    if m[0] == m[2]:
        s = mpf(x) / mpf(m[0])
        return sum(c * (s - t) ** k / mp.factorial(k) for c, t, k in terms if s >= t)
    whole = mpf(0)
    for start, end, alpha, beta in density_pieces(m):
        for c, t, k in terms:
            last = end if t == 0 else min(end, mpf(x) / t)
            if last <= start:
                continue
            for i in range(k + 1):
                factor = mp.binomial(k, i) * mpf(x) ** i * (-t) ** (k - i) / mp.factorial(k)
                inner = alpha * moment(start, last, -i) + beta * moment(start, last, 1 - i)
                whole += c * factor * inner
    return whole


def quantile(factor: Factor, p: float) -> float:
    a, c, b, shape = factor
    if shape == "uniform" or a == b:
        return a + p * (b - a)
    if p <= (c - a) / (b - a):
        return a + math.sqrt(p * (b - a) * (c - a))
    return b - math.sqrt((1 - p) * (b - a) * (b - c))


def together(factors: list[Factor], x: float) -> float:
    """P(n <= x) when all factors stand at the same quantile, by bisection."""
    low, high = 0.0, 1.0
    for _ in range(60):
        p = (low + high) / 2
        at = [quantile(factor, p) for factor in factors]
        low, high = (p, high) if math.fsum(at[:5]) * at[5] <= x else (low, p)
    return (low + high) / 2


def mixture(factors: list[Factor], dependence: float) -> Callable[[float], float]:
    low = math.fsum(f[0] for f in factors[:5]) * factors[5][0]
    high = math.fsum(f[2] for f in factors[:5]) * factors[5][2]

    def below(x: float) -> float:
        if x <= low or x >= high:
            return float(x >= high)
        alone = float(independent(factors, x)) if dependence < 1 else 0.0
        return (1 - dependence) * alone + dependence * together(factors, x)

    return below


def found(factors: list[Factor], p: tuple[float, ...], dependence: float) -> list[float]:
    low, best, high, shape = zip(*factors, strict=True)
    return list(quantiles(low, best, high, p, shape=shape, dependence=dependence))


HARD: dict[str, list[Factor]] = {
    "five triangular and a multiplier": [
        (0.020, 0.025, 0.032, "triangular"),
        (0.001, 0.004, 0.008, "triangular"),
        (0.0, 0.003, 0.006, "triangular"),
        (0.002, 0.005, 0.012, "triangular"),
        (0.004, 0.010, 0.022, "triangular"),
        (1.0, 1.15, 1.3, "triangular"),
    ],
    "one live factor": [(0.02, 0.02, 0.05, "triangular"), *[POINT] * 4, ONE],
    "one live multiplier": [(0.03, 0.03, 0.03, "triangular"), *[POINT] * 4, (1, 1, 1.3, "uniform")],
    "two uniform of one width": [
        (0.02, 0.03, 0.06, "uniform"),
        (0.0, 0.0, 0.04, "uniform"),
        *[POINT] * 3,
        ONE,
    ],
    "wide uniform beside a narrow one": [
        (0.02, 0.03, 0.12, "uniform"),
        (0.0, 0.0, 1e-5, "uniform"),
        *[POINT] * 3,
        ONE,
    ],
    "wide with its mode at an end beside narrow ones": [
        (0.02, 0.02, 0.12, "triangular"),
        (0.0, 1e-5, 1e-5, "triangular"),
        (0.0, 0.0, 1e-4, "uniform"),
        *[POINT] * 2,
        ONE,
    ],
    "one factor and a wide multiplier": [
        (0.02, 0.02, 0.03, "triangular"),
        *[POINT] * 4,
        (1.0, 1.3, 1.3, "triangular"),
    ],
    "very narrow factor and a wide multiplier": [
        (0.09999, 0.1, 0.1, "triangular"),
        *[POINT] * 4,
        (1.0, 1.0, 1.3, "uniform"),
    ],
    "wide factor and a very narrow multiplier": [
        (0.02, 0.02, 0.12, "uniform"),
        *[POINT] * 4,
        (1.15, 1.15, 1.1501, "triangular"),
    ],
    "mode at the upper end under a multiplier on the border of narrow": [
        (0.0, 0.1572, 0.1572, "triangular"),
        (0.0, 0.0, 0.00026, "uniform"),
        *[POINT] * 3,
        (1.0, 1.0, 1.4, "triangular"),
    ],
    "uniform under a multiplier a little narrower": [
        (0.02, 0.2, 0.2, "uniform"),
        *[POINT] * 4,
        (1.0, 1.0, 1.3, "uniform"),
    ],
    "sum that begins at zero": [
        (0.0, 0.0, 0.03, "triangular"),
        (0.0, 0.01, 0.02, "uniform"),
        *[POINT] * 3,
        (1.0, 1.15, 1.3, "triangular"),
    ],
    "very large vegetation": [
        (0.02, 0.025, 0.03, "triangular"),
        POINT,
        POINT,
        (0.0, 0.0, 0.004, "triangular"),
        (0.05, 0.1, 0.2, "triangular"),
        (1.0, 1.0, 1.3, "triangular"),
    ],
}


@pytest.mark.parametrize("dependence", [0.0, 0.5, 0.95, 1.0])
@pytest.mark.parametrize("name", HARD)
def test_percentiles_of_a_hard_shape_are_right_to_a_millionth(name: str, dependence: float) -> None:
    factors = HARD[name]
    below = mixture(factors, dependence)
    p = (0.001, *P, 0.999)
    for probability, q in zip(p, found(factors, p, dependence), strict=True):
        assert below(q - WITHIN) <= probability <= below(q + WITHIN), (probability, q)


def random_factors(seed: int) -> tuple[list[Factor], float]:
    """One to five live adding factors, widths over four decades, modes at ends too."""
    rng = random.Random(seed)
    live = rng.sample(range(5), rng.randint(1, 5))
    factors: list[Factor] = []
    for i in range(5):
        low = round(rng.uniform(0, 0.03), 4)
        width = round(10 ** rng.uniform(-5, -1), 7) if i in live else 0.0
        factors.append(one_factor(rng, low, width))
    m_width = round(10 ** rng.uniform(-4, -0.3), 6) if rng.random() < 0.6 else 0.0
    factors.append(one_factor(rng, rng.choice([1.0, 1.15]), m_width))
    return factors, rng.choice([0.0, 0.0, 0.25, 0.5, 0.9])


def one_factor(rng: random.Random, low: float, width: float) -> Factor:
    where = rng.choice([0.0, 1.0, rng.random(), rng.random()])
    high = low + width
    best = {0.0: low, 1.0: high}.get(where, min(low + where * width, high))
    return low, best, high, rng.choice(["triangular", "triangular", "uniform"])


@pytest.mark.parametrize("seed", range(60))
def test_percentiles_of_random_shapes_are_right_to_a_millionth(seed: int) -> None:
    factors, dependence = random_factors(seed)
    below = mixture(factors, dependence)
    p = random.Random(seed).choice(P)
    (q,) = found(factors, (p,), dependence)
    assert below(q - WITHIN) <= p <= below(q + WITHIN), (factors, dependence, p, q)


# Values by quadrature with 40 digits, by another program than ours (derived, not published).
EXAMPLE: list[Factor] = [
    (0.024, 0.026, 0.028, "uniform"),
    (0.001, 0.005, 0.010, "triangular"),
    (0.001, 0.003, 0.005, "uniform"),
    (0.004, 0.010, 0.015, "triangular"),
    (0.010, 0.020, 0.025, "triangular"),
]


@pytest.mark.parametrize(
    ("multiplier", "p", "expected"),
    [
        (ONE, 0.05, 0.0546398),
        (ONE, 0.50, 0.0624338),
        (ONE, 0.95, 0.0696872),
        (ONE, 0.0585818, 0.055),
        (ONE, 0.957429, 0.070),
        ((1.15, 1.15, 1.15, "uniform"), 0.95, 0.0801403),
        ((1.0, 1.1, 1.3, "uniform"), 0.05, 0.0596828),
        ((1.0, 1.1, 1.3, "uniform"), 0.50, 0.071441),
        ((1.0, 1.1, 1.3, "uniform"), 0.95, 0.0844138),
        ((1.0, 1.1, 1.3, "uniform"), 0.428603, 0.070),
    ],
)
def test_mixed_example_has_its_derived_percentiles(
    multiplier: Factor, p: float, expected: float
) -> None:
    assert found([*EXAMPLE, multiplier], (p,), 0.0) == pytest.approx([expected], abs=1e-7)


def test_mixed_example_has_its_derived_moments() -> None:
    low, best, high, shape = zip(*EXAMPLE, (1.0, 1.1, 1.3, "uniform"), strict=True)
    result = spread(low, best, high, shape=shape, dependence=0.0)
    assert (result.mean, result.sd) == pytest.approx((0.0716833, 0.00753984), abs=5e-8)


def test_triangular_factor_has_its_derived_quantiles_and_moments() -> None:
    # Triangular on 0.024, 0.028, 0.040: derived by quadrature with 40 digits.
    six = [(0.024, 0.028, 0.040, "triangular"), *[POINT] * 4, ONE]
    p, expected = (0.05, 0.5, 0.479166666667), (0.025788854382, 0.0302020410289, 0.030)
    assert found(six, p, 0.5) == pytest.approx(expected, abs=1e-12)
    low, best, high, _ = zip(*six, strict=True)
    result = spread(low, best, high)
    moments = (0.0306666666667, 0.0033993463424)
    assert (result.mean, result.sd) == pytest.approx(moments, rel=1e-11)


def test_five_equal_uniform_factors_follow_irwin_and_hall() -> None:
    # Irwin 1927, Hall 1927: the sum of five uniform numbers on (0, 1) has F(2) = 27/120.
    unit = (0.0, 0.5, 1.0, "uniform")
    (q,) = found([*[unit] * 5, ONE], (27 / 120,), 0.0)
    assert q == pytest.approx(2.0, abs=WITHIN)


@pytest.mark.parametrize("dependence", [0.0, 0.3, 1.0])
@pytest.mark.parametrize("seed", range(8))
def test_mean_and_deviation_match_adaptive_quadrature(seed: int, dependence: float) -> None:
    factors, _ = random_factors(seed)
    moments = [[mean_power(f, k) for k in (1, 2)] for f in factors]
    mean_s = mp.fsum(m[0] for m in moments[:5])
    variance_s = mp.fsum(m[1] - m[0] ** 2 for m in moments[:5])
    first = mean_s * moments[5][0]
    second = (variance_s + mean_s**2) * moments[5][1]
    joint = [joint_power(factors, k) for k in (1, 2)]
    mean = (1 - dependence) * first + dependence * joint[0]
    variance = (1 - dependence) * second + dependence * joint[1] - mean**2
    low, best, high, shape = zip(*factors, strict=True)
    result = spread(low, best, high, shape=shape, dependence=dependence)
    assert result.mean == pytest.approx(float(mean), rel=1e-12)
    assert result.sd == pytest.approx(float(mp.sqrt(variance)), rel=1e-11)


def panels(factors: list[Factor]) -> list[Any]:
    turns = {
        mp.asin(mp.sqrt((mpf(c) - mpf(a)) / (mpf(b) - mpf(a)))) for a, c, b, _ in factors if b > a
    }
    return sorted({mpf(0), mp.pi / 2, *turns})


def exact_quantile(factor: Factor, angle: mpf) -> mpf:
    a, c, b = (mpf(v) for v in factor[:3])
    if a == b:
        return a
    if factor[3] == "uniform":
        return a + (b - a) * mp.sin(angle) ** 2
    if mp.sin(angle) ** 2 <= (c - a) / (b - a):
        return a + mp.sin(angle) * mp.sqrt((b - a) * (c - a))
    return b - mp.cos(angle) * mp.sqrt((b - a) * (b - c))


def mean_power(factor: Factor, power: int) -> mpf:
    return joint_power([factor, *[POINT] * 4, ONE], power)


def joint_power(factors: list[Factor], power: int) -> mpf:
    def inside(angle: mpf) -> mpf:
        at = [exact_quantile(factor, angle) for factor in factors]
        return (mp.fsum(at[:5]) * at[5]) ** power * mp.sin(2 * angle)

    with mp.workdps(30):
        return mp.quad(inside, panels(factors))


@pytest.mark.parametrize("dependence", [0.0, 0.5])
@pytest.mark.parametrize("name", ["five triangular and a multiplier", "very large vegetation"])
def test_percentiles_agree_with_400_000_draws_within_their_error(
    name: str, dependence: float
) -> None:
    factors, draws = HARD[name], 400_000
    rng = np.random.default_rng(20260101)
    alone = drawn(factors, rng.random((6, draws)))
    joint = drawn(factors, np.broadcast_to(rng.random(draws), (6, draws)))
    n = np.where(rng.random(draws) < dependence, joint, alone)
    for p, q in zip(P, found(factors, P, dependence), strict=True):
        standard_error = math.sqrt(p * (1 - p) / draws)
        assert abs(float(np.mean(n <= q)) - p) < 4.5 * standard_error


def drawn(factors: list[Factor], u: Any) -> Any:
    columns = [
        np.where(
            row * (b - a) <= c - a,
            a + np.sqrt(row * (b - a) * (c - a)),
            b - np.sqrt((1 - row) * (b - a) * (b - c)),
        )
        for (a, c, b, _), row in zip(factors, u, strict=True)
    ]
    return sum(columns[:5]) * columns[5]
