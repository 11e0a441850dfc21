"""One sentence for one factor: its value, where it comes from, how its range was moved."""

from typing import Final

from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import rounded, show_value
from roughness.reasoning.account import Step
from roughness.survey.words import MULTIPLIER, Factor

TITLES: Final[dict[Factor, str]] = {
    "base": "base",
    "irregularity": "irregularity",
    "variation": "variation of the section",
    "obstruction": "obstruction",
    "vegetation": "vegetation",
    "meander": "multiplier",
}
# Limits closer than this are the same limit: no table has steps this small.
_SAME: Final = 1e-9


def factor_sentence(step: Step, zone: str | None = None) -> str:
    """Return the sentence; ``zone`` names bed or banks where they are told apart."""
    grade = f", {printable(step.grade_name)}" if step.grade_name else ""
    reasons = [_origin(step), _moved(step), _note(step)]
    told = "; ".join(reason for reason in reasons if reason)
    begins = f"{printable(zone)}, " if zone else ""
    return capital(
        f"{begins}{TITLES[step.factor]} {printable(step.symbol)} {_value(step)}{grade}: {told}."
    )


def capital(sentence: str) -> str:
    """Return the sentence with its first letter as a capital."""
    return sentence[:1].upper() + sentence[1:]


def shown(factor: Factor, value: float) -> str:
    """Print a factor's value with the three decimals of the tables, or all it has."""
    if factor == MULTIPLIER or value == 0:
        return show_value(value)
    three = rounded(value, 3)
    return three if abs(float(three) - value) < _SAME else show_value(value)


def _value(step: Step) -> str:
    best, low, high = (
        shown(step.factor, value) for value in (step.range.best, step.range.low, step.range.high)
    )
    return best if step.range.is_point else f"{best} ({low} to {high})"


def _origin(step: Step) -> str:
    source = f" ({printable(step.source)})" if step.source else ""
    if step.grade_name is None:
        return "a value of one's own, which no table backs"
    if step.basis == "measured":
        told = f"{printable(step.measured_says)} points to it{source}"
    else:
        told = f"chosen{source}"
    if step.own_best:
        return f"{told}, with the best value set {_side(step)}"
    if step.best_is_middle and step.published and _close(step.range.best, step.published.best):
        return f"{told}, at the middle of the published range"
    return told


def _side(step: Step) -> str:
    if step.published is None:
        return "where nothing is published"
    below = step.range.best < step.published.low - _SAME
    above = step.range.best > step.published.high + _SAME
    return f"{'outside' if below or above else 'inside'} the published range"


def _moved(step: Step) -> str:
    """Say which published limits were left, or not made use of."""
    if step.published is None:
        return ""
    low, high = step.published.low, step.published.high
    ends = [_end(step, "below", step.range.low, low, step.range.low < low)]
    ends.append(_end(step, "above", step.range.high, high, step.range.high > high))
    told = [end for end in ends if end]
    return f"the range was {' and '.join(told)}" if told else ""


def _end(step: Step, side: str, limit: float, published: float, widened: bool) -> str:
    if _close(limit, published):
        return ""
    told = shown(step.factor, published)
    if widened:
        return f"widened {side} the published {told}"
    return f"narrowed from the published {told} to {shown(step.factor, limit)}"


def _note(step: Step) -> str:
    note = (step.note or "").strip()
    return f'the note says: "{printable(note)}"' if note else ""


def _close(one: float, other: float) -> bool:
    return abs(one - other) < _SAME
