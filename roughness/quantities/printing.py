"""How numbers are printed for people; the only place that prints n."""

from collections.abc import Sequence
from decimal import ROUND_HALF_UP, Context, Decimal
from math import isfinite
from typing import Protocol

# A float sum such as 0.0155 + 0.02 carries noise in its 17th digit; rounding starts from
# the decimal value that twelve significant digits hold.
_SIGNIFICANT = 12
# Wide enough for any float, so that an absurd number is printed and not an error.
_WIDE = Context(prec=700, rounding=ROUND_HALF_UP)


class _HasLimits(Protocol):
    @property
    def low(self) -> float: ...
    @property
    def high(self) -> float: ...


def _decimal(value: float) -> Decimal:
    return Decimal(f"{value:.{_SIGNIFICANT}g}")


def rounded(value: float, places: int) -> str:
    """Print ``value`` with ``places`` decimals, halves away from zero on the decimal value."""
    if not isfinite(value):
        return str(value)
    return str(_decimal(value).quantize(Decimal(1).scaleb(-places), context=_WIDE))


def show_n(n: float) -> str:
    """Print n: three decimals, two significant digits beyond 0.1.

    >>> show_n(0.04025), show_n(0.0355), show_n(0.1012), show_n(0.1)
    ('0.040', '0.036', '0.10', '0.100')
    """
    exact = _decimal(n)
    if exact <= Decimal("0.1"):
        return rounded(n, 3)
    return rounded(n, 1 - exact.adjusted()) if exact.adjusted() <= 0 else rounded(n, 0)


def show_range(limits: _HasLimits) -> str:
    """Print the limits of a range of n: ``0.036 to 0.064``."""
    return f"{show_n(limits.low)} to {show_n(limits.high)}"


def show_value(value: float) -> str:
    """Print a table value or a measurement as it was written, without float noise."""
    return f"{_decimal(value).normalize():f}"


def show_addend(value: float) -> str:
    """Print what a factor adds to n as the tables do: three decimals, up to five where it has more.

    >>> show_addend(0.02), show_addend(0.0285), show_addend(0.019 - 0.014 / 6), show_addend(0)
    ('0.020', '0.0285', '0.01667', '0')
    """
    exact = _decimal(value)
    if not isfinite(value) or not exact:
        return show_value(value)
    three = rounded(value, 3)
    return three if Decimal(three) == exact else show_value(float(rounded(value, 5)) or value)


def show_share(share: float) -> str:
    """Print a share as a whole percentage: ``55 %``."""
    return f"{rounded(share * 100, 0)} %"


def enumerate_words(words: Sequence[str], last: str = "and") -> str:
    """Join words as a sentence does: ``minor, moderate or severe``."""
    if len(words) < 2:
        return "".join(words)
    return f"{', '.join(words[:-1])} {last} {words[-1]}"
