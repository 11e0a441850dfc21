"""What experienced people differ by when they judge n of the same reach."""

import math
from dataclasses import dataclass

Z95 = 1.6448536269514722  # 95 % quantile of the standard normal distribution


@dataclass(frozen=True, slots=True)
class People:
    """The 5 and 95 % limits of what experienced people would say, with where that is from."""

    p05: float
    p95: float
    source: str
    provenance: str


SOURCE = (
    "spread of estimates of n by trained engineers, lognormal, sigma of ln n = 0.582 + 0.10 ln n: "
    "US Army Corps of Engineers 1986, Research Document 26"
)


def people(n: float) -> People | None:
    """Return the limits between which nine of ten experienced people would put this reach.

    The published relation gives the standard deviation as n times the coefficient of
    variation of a lognormal, so ``n`` is taken as the mean of what people say. From memory,
    not read in the source.

    Parameters
    ----------
    n : float
        Manning's n, in s/m^(1/3).

    Returns
    -------
    People or None
        None at and below n = exp(-5.82) = 0.003, where the relation has no spread left.

    >>> limits = people(0.05)
    >>> round(limits.p05, 4), round(limits.p95, 4)
    (0.0302, 0.0765)
    """
    sigma = sigma_of_people(n)
    if sigma is None:
        return None
    middle = math.log(n) - sigma**2 / 2
    return People(math.exp(middle - Z95 * sigma), math.exp(middle + Z95 * sigma), SOURCE, "memory")


def sigma_of_people(n: float) -> float | None:
    """Return the standard deviation of ln n of what experienced people say of one reach.

    None at and below n = exp(-5.82) = 0.003. Source as of :func:`people`; from memory.
    """
    sigma = 0.582 + 0.10 * math.log(n) if n > 0 else 0.0
    return sigma if sigma > 0 else None


def sd_of_people(n: float) -> float | None:
    """Return the standard deviation of n itself: n sqrt(exp(sigma^2) - 1), in s/m^(1/3).

    Source as of :func:`people`; from memory.

    >>> round(sd_of_people(0.05), 4)
    0.0144
    """
    sigma = sigma_of_people(n)
    return None if sigma is None else n * math.sqrt(math.expm1(sigma**2))
