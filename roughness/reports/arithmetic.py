"""The sums behind n written out, so that a stranger can rebuild n with a pocket calculator."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import isclose
from typing import Final, Literal

from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.quantities.printing import rounded, show_addend, show_n, show_value
from roughness.quantities.ranges import Range
from roughness.survey.words import MULTIPLIER, Factor, Setting, factors_of

Word = Literal["low", "best", "high"]
WORDS: Final[tuple[Word, ...]] = ("low", "best", "high")
# Enough digits that n shows the same three decimals whoever goes on from them.
_PLACES: Final = 6
_EXACT: Final = 1e-12


@dataclass(frozen=True, kw_only=True)
class Worked:
    """One line of arithmetic: ``(0.030 + 0.003) × 1.15 = 0.03795``, shown as 0.038."""

    word: Word
    figures: str
    equals: Literal["=", "≈"]
    """``≈`` where the result has more than six decimals."""
    result: str
    shown: str
    """The result as n is shown everywhere."""


@dataclass(frozen=True, kw_only=True)
class Sum:
    """n of the part, or of its bed or banks, at low, best and high."""

    segment: str | None
    symbols: str
    """``(nb + n1 + n2 + n3 + n4) × m``."""
    lines: tuple[Worked, ...]


def sums_of(estimate: Estimate, setting: Setting) -> tuple[Sum, ...]:
    """Return the sum of the part, or one for each segment, each at low, best and high.

    Figures stand there with every digit that was used.
    """
    if not estimate.segments:
        return (_sum(None, estimate.factors, setting, estimate.n),)
    return tuple(
        _sum(
            segment.name,
            [entry for entry in estimate.factors if entry.segment == segment.name],
            setting,
            segment.n,
        )
        for segment in estimate.segments
    )


def together(estimate: Estimate) -> Sum | None:
    """Return how bed and banks are put together by the equal-velocity relation; else None.

    n = (sum of P n^1.5 / sum of P)^(2/3), P the share of the wetted perimeter: Horton 1933,
    Einstein 1934.
    """
    if not estimate.segments:
        return None
    segments = estimate.segments
    whole = show_value(sum(segment.perimeter_percent for segment in segments))

    terms = " + ".join(f"P({s.name}) × n({s.name})^1.5" for s in segments)

    def figures(word: Word) -> str:
        added = " + ".join(
            f"{show_value(s.perimeter_percent)} × {_six(getattr(s.n, word))}^1.5" for s in segments
        )
        return f"(({added}) / {whole})^(2/3)"

    return Sum(
        segment=None,
        symbols=f"(({terms}) / sum of P)^(2/3)",
        lines=tuple(_worked(word, figures(word), estimate.n, exact=False) for word in WORDS),
    )


def _sum(segment: str | None, factors: Sequence[FactorEstimate], setting: Setting, n: Range) -> Sum:
    entries = [entry for entry in factors if entry.factor in factors_of(setting)]
    return Sum(
        segment=segment,
        symbols=_formula(entries, [entry.symbol for entry in entries]),
        lines=tuple(
            _worked(word, _formula(entries, list(_figures(entries, word))), n) for word in WORDS
        ),
    )


def _formula(entries: Sequence[FactorEstimate], terms: Sequence[str]) -> str:
    pairs = list(zip(entries, terms, strict=True))
    added = " + ".join(term for entry, term in pairs if entry.factor != MULTIPLIER)
    times = next((term for entry, term in pairs if entry.factor == MULTIPLIER), None)
    return added if times is None else f"({added}) × {times}"


def _figures(entries: Sequence[FactorEstimate], word: Word) -> Iterator[str]:
    for entry in entries:
        yield figure(entry.factor, getattr(entry, word))


def figure(factor: Factor, value: float) -> str:
    """Print a factor's value with every digit it has: three decimals at least, if it adds."""
    told = show_addend(value)
    if factor == MULTIPLIER or not isclose(float(told), value, abs_tol=_EXACT):
        return show_value(value)
    return told


def _worked(word: Word, figures: str, n: Range, *, exact: bool = True) -> Worked:
    value = getattr(n, word)
    result = _six(value)
    is_exact = exact and isclose(float(result), value, abs_tol=_EXACT)
    return Worked(
        word=word,
        figures=figures,
        equals="=" if is_exact else "≈",
        result=result,
        shown=show_n(value),
    )


def _six(value: float) -> str:
    return show_value(float(rounded(value, _PLACES)))
