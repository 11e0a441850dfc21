"""One sentence for one factor: its value, where it comes from, how its range was moved."""

from typing import Final

from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_addend, show_value
from roughness.quantities.ranges import Range
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
    named = f"{TITLES[step.factor]} {printable(step.symbol)}"
    ends = "" if told.endswith(('."', '!"', '?"')) else "."
    return capital(f"{begins}{named} {_value(step)}{grade}: {told}{ends}")


def capital(sentence: str) -> str:
    """Return the sentence with its first letter as a capital."""
    return sentence[:1].upper() + sentence[1:]


def shown(factor: Factor, value: float) -> str:
    """Print a factor's value as the tables do."""
    return show_value(value) if factor == MULTIPLIER else show_addend(value)


def _value(step: Step) -> str:
    best, low, high = (
        shown(step.factor, value) for value in (step.range.best, step.range.low, step.range.high)
    )
    return best if step.range.is_point else f"{best} ({low} to {high})"


def _origin(step: Step) -> str:
    if step.grade_name is None:
        return "a value of one's own, which no table backs"
    measured = printable(step.measured_says)
    if step.basis == "measured":
        told = f"{measured} points to it{_in_brackets(step.source)}"
    else:
        told = f"chosen{_in_brackets(step.source, measured and f'{measured} noted')}"
    if step.own_best:
        return f"{told}, with the best value set {_side(step)}"
    published = step.published
    if step.best_is_middle and published and _close(step.range.best, published.best):
        one = "at the single published value"
        return f"{told}, {one if published.is_point else 'at the middle of the published range'}"
    return told


def _in_brackets(*words: str) -> str:
    told = "; ".join(printable(word) for word in words if word)
    return f" ({told})" if told else ""


def _side(step: Step) -> str:
    if step.published is None:
        return "where nothing is published"
    below = step.range.best < step.published.low - _SAME
    above = step.range.best > step.published.high + _SAME
    return f"{'outside' if below or above else 'inside'} the published range"


def _moved(step: Step) -> str:
    """Say at which ends the published range was left, or not made use of."""
    if step.published is None:
        return ""
    lower = _how(step.published.low - step.range.low)
    upper = _how(step.range.high - step.published.high)
    if lower == upper:
        told = f"{lower} at both ends" if lower else ""
    else:
        ends = ((lower, "lower"), (upper, "upper"))
        told = " and ".join(f"{how} at the {end} end" for how, end in ends if how)
    return f"the {_published(step.factor, step.published)} was {told}" if told else ""


def _how(beyond: float) -> str:
    """Say what was done to a limit that now lies so far beyond the published one."""
    if abs(beyond) < _SAME:
        return ""
    return "widened" if beyond > 0 else "narrowed"


def _published(factor: Factor, published: Range) -> str:
    if published.is_point:
        return f"single published {shown(factor, published.low)}"
    return f"published {shown(factor, published.low)} to {shown(factor, published.high)}"


def _note(step: Step) -> str:
    note = (step.note or "").strip()
    return f'the note says: "{printable(note)}"' if note else ""


def _close(one: float, other: float) -> bool:
    return abs(one - other) < _SAME
