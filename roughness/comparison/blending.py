"""What people would say and what was measured, weighed by their errors: a value to look at.

Prior: lognormal, what experienced people differ by when they judge the same reach. Evidence:
each measured or analogous value errs lognormally. Posterior: their product on a grid of ln n,
the same on every run. Nothing here adopts a value: somebody does, with a reason.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from math import exp, log, log1p, sqrt
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.comparison.analogues import Analogue
from roughness.errors import InputError
from roughness.quantities.printing import rounded, show_n

Numbers = NDArray[np.float64]

# Within one type of channel the upper quartile of measured n stays under 2.3 times the lower
# one (Lee and Julien, composite resistance, abstract: seen second hand); taken as lognormal,
# whose quartiles lie 0.6745 standard deviations from the middle.
SIGMA_OF_ONE_ANALOGUE: Final = log(2.3) / (2 * 0.6744897501960817)
LEAST_LIKENESS: Final = 0.5
"""Less like than this a stream is no evidence: common practice, no source."""
FAR_APART: Final = 2.0
"""In standard deviations; beyond it prior and evidence contradict each other."""
_LEAST_SIGMA, _LARGEST_SIGMA = 0.005, 3.0
_REACH, _STEPS_IN_SIGMA, _DRAWN = 8.0, 200, 401


@dataclass(frozen=True, kw_only=True)
class Belief:
    """A lognormal: the middle of n, and how far it errs."""

    median: float
    """s/m^(1/3)."""
    sigma: float
    """Standard deviation of ln n."""
    what: str
    """Where it comes from, in words."""


@dataclass(frozen=True, kw_only=True)
class Curves:
    """Three densities of ln n at the same n; each has the area 1."""

    n: Numbers
    prior: Numbers
    evidence: Numbers
    """All pieces of evidence together."""
    posterior: Numbers


@dataclass(frozen=True, kw_only=True)
class Blend:
    """Prior and evidence weighed: shown as three curves, never adopted by itself."""

    mean: float
    sd: float
    p05: float
    p16: float
    p50: float
    p84: float
    p95: float
    share_of_evidence: float
    """How far the middle moved from the prior's to the evidence's in ln n: 0 to 1."""
    apart: float
    """Distance of prior and evidence, in standard deviations of their difference."""
    says: tuple[str, ...]
    curves: Curves


def prior_of_people(n: float, sigma: float) -> Belief:
    """Return what experienced people would say of a reach judged ``n``.

    Parameters
    ----------
    n : float
        The judged value, taken as the mean of what people say, as the published relation is.
    sigma : float
        Standard deviation of ln n between people (``additive.sigma_of_people``; from memory).
    """
    _refuse_values(n, sigma, "prior")
    return Belief(
        median=n * exp(-(sigma**2) / 2), sigma=sigma, what="what experienced people differ by"
    )


def evidence_of_flow(n: float, sd: float, what: str = "n from a measured flow") -> Belief:
    """Return a measured n with its standard deviation (both s/m^(1/3)) as evidence."""
    if not (n > 0 and sd > 0):
        raise InputError(
            "n or its sd is not above 0",
            where=what,
            wanted="give the errors of the measurement: a value without error cannot be weighed",
        )
    sigma = sqrt(log1p((sd / n) ** 2))
    _refuse_values(n, sigma, what)
    return Belief(median=n, sigma=sigma, what=what)


def evidence_of_analogues(alike: Sequence[Analogue]) -> Belief | None:
    """Return the measured streams that are like enough as one piece of evidence.

    Their n is averaged in ln n with likeness as weight. The error is that of a single stream,
    or the spread between them where that is larger, however many there are: streams that are
    like the reach in what is known share what is not.

    Returns
    -------
    Belief or None
        None where no stream has a likeness of 0.5 or more.
    """
    taken = [one for one in alike if one.likeness >= LEAST_LIKENESS]
    if not taken:
        return None
    weights = np.array([one.likeness for one in taken])
    logs = np.log([one.n for one in taken])
    middle = float(np.average(logs, weights=weights))
    between = sqrt(float(np.average((logs - middle) ** 2, weights=weights)))
    return Belief(
        median=exp(middle),
        sigma=max(SIGMA_OF_ONE_ANALOGUE, between),
        what="measured streams: " + ", ".join(one.stream.name for one in taken),
    )


def blend(prior: Belief, evidence: Sequence[Belief], at: ArrayLike | None = None) -> Blend:
    """Weigh a prior and pieces of evidence that err independently.

    Parameters
    ----------
    prior : Belief
        As of :func:`prior_of_people`.
    evidence : sequence of Belief
        One or more.
    at : array of shape (N,), optional
        n, above 0, at which the curves are wanted; by default 401 values that cover them.

    Returns
    -------
    Blend
        Percentiles of the posterior; deterministic.

    Raises
    ------
    InputError
        Where there is no evidence, or a value or an error cannot be.

    Examples
    --------
    >>> judged = Belief(median=0.05, sigma=0.3, what="people")
    >>> found = blend(judged, [Belief(median=0.035, sigma=0.1, what="flow of 12 May")])
    >>> round(found.p50, 4), round(found.share_of_evidence, 2)
    (0.0363, 0.9)
    """
    if not evidence:
        raise InputError("there is no evidence to weigh", wanted="one measured value or more")
    for belief in (prior, *evidence):
        _refuse_values(belief.median, belief.sigma, belief.what)
    logs = _grid((prior, *evidence))
    step = logs[1] - logs[0]
    likely = _log_likelihood(evidence, logs)
    curves = [_normal(_log_density(prior, logs), step), _normal(likely, step)]
    curves.append(_normal(_log_density(prior, logs) + likely, step))
    drawn = _drawn((prior, *evidence)) if at is None else np.asarray(at, dtype=np.float64)
    told = [np.interp(np.log(drawn), logs, curve, left=0.0, right=0.0) for curve in curves]
    return _summed(
        logs, curves, Curves(n=drawn, prior=told[0], evidence=told[1], posterior=told[2])
    )


def _summed(logs: Numbers, curves: Sequence[Numbers], told: Curves) -> Blend:
    middles, variances = zip(*(_moments(logs, curve) for curve in curves), strict=True)
    posterior = curves[2] * (logs[1] - logs[0])
    p05, p16, p50, p84, p95 = _percentiles(logs, posterior, (0.05, 0.16, 0.50, 0.84, 0.95))
    n = np.exp(logs)
    mean = float((posterior * n).sum())
    difference = middles[1] - middles[0]
    apart = abs(difference) / sqrt(variances[0] + variances[1])
    moved = (middles[2] - middles[0]) / difference if difference else 0.0
    # Where both have one middle nothing moves; the narrower of the two still weighs more.
    share = moved if apart > 1e-6 else variances[0] / (variances[0] + variances[1])
    return Blend(
        mean=mean,
        sd=sqrt(max(0.0, float((posterior * (n - mean) ** 2).sum()))),
        p05=p05,
        p16=p16,
        p50=p50,
        p84=p84,
        p95=p95,
        share_of_evidence=float(min(1.0, max(0.0, share))),
        apart=apart,
        says=_sentences(exp(middles[0]), exp(middles[1]), apart),
        curves=told,
    )


def _sentences(prior: float, evidence: float, apart: float) -> tuple[str, ...]:
    caution = "The blend is shown to be looked at; nobody has adopted it."
    if apart <= FAR_APART:
        return (caution,)
    return (
        f"The evidence ({show_n(evidence)}) lies {rounded(apart, 1)} standard deviations from what"
        f" people would say ({show_n(prior)}): find the reason before the two are weighed.",
        caution,
    )


def _grid(beliefs: Sequence[Belief]) -> Numbers:
    low = min(log(one.median) - _REACH * one.sigma for one in beliefs)
    high = max(log(one.median) + _REACH * one.sigma for one in beliefs)
    # The product is narrower than its parts, by the root of their number at most.
    finest = min(one.sigma for one in beliefs) / sqrt(len(beliefs)) / _STEPS_IN_SIGMA
    return np.linspace(low, high, int((high - low) / finest) + 2)


def _drawn(beliefs: Sequence[Belief]) -> Numbers:
    low = min(log(one.median) - one.sigma * _REACH / 2 for one in beliefs)
    high = max(log(one.median) + one.sigma * _REACH / 2 for one in beliefs)
    return np.asarray(np.exp(np.linspace(low, high, _DRAWN)))


def _log_density(belief: Belief, logs: Numbers) -> Numbers:
    return np.asarray(-0.5 * ((logs - log(belief.median)) / belief.sigma) ** 2)


def _log_likelihood(evidence: Sequence[Belief], logs: Numbers) -> Numbers:
    return np.asarray(sum(_log_density(one, logs) for one in evidence))


def _normal(log_density: Numbers, step: float) -> Numbers:
    density = np.exp(log_density - log_density.max())
    return np.asarray(density / (density.sum() * step))


def _moments(logs: Numbers, density: Numbers) -> tuple[float, float]:
    mass = density * (logs[1] - logs[0])
    middle = float((mass * logs).sum())
    return middle, float((mass * (logs - middle) ** 2).sum())


def _percentiles(logs: Numbers, mass: Numbers, shares: Sequence[float]) -> list[float]:
    # Half of its own mass lies below a grid point: the trapezoidal rule.
    below = mass.cumsum() - mass / 2
    return [float(value) for value in np.exp(np.interp(shares, below, logs))]


def _refuse_values(n: float, sigma: float, what: str) -> None:
    if not 0 < n < float("inf"):
        raise InputError("n is not above 0", where=what, wanted="Manning's n is due")
    if not _LEAST_SIGMA <= sigma <= _LARGEST_SIGMA:
        raise InputError(
            f"an error of {sigma:.2g} in ln n cannot be weighed",
            where=what,
            wanted=f"{_LEAST_SIGMA} (no n is known better) to {_LARGEST_SIGMA} is due",
        )
