"""How grades and factors are called inside the sentences of findings."""

from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, rounded, show_addend, show_value
from roughness.survey.words import MULTIPLIER, Factor

MOST_TIMES = 1e6

FACTOR_WORDS = {
    "base": "base value",
    "irregularity": "irregularity",
    "variation": "variation of the section",
    "obstruction": "obstruction",
    "vegetation": "vegetation",
    "meander": "multiplier for bends",
}


def factor_value(factor: Factor, value: float) -> str:
    """Print a factor's value as the tables do: ``0.020``, and ``1.15`` for the multiplier."""
    return show_value(value) if factor == MULTIPLIER else show_addend(value)


def in_words(key: str) -> str:
    """Return a key as words: ``very-large`` reads 'very large'."""
    return printable(key).replace("-", " ")


def either(keys: str) -> str:
    """Join keys that blanks separate: 'minor' or 'appreciable'."""
    return enumerate_words([f"'{in_words(key)}'" for key in keys.split()], last="or")


def both(keys: str) -> str:
    """Join keys that blanks separate: 'minor' and 'appreciable'."""
    return enumerate_words([f"'{in_words(key)}'" for key in keys.split()])


def starting(sentence: str) -> str:
    """Return the sentence with its first letter as a capital."""
    return sentence[:1].upper() + sentence[1:]


def ratio(of: float, to: float, places: int = 1) -> str:
    """Print how many times ``to`` goes into ``of``; absurd measurements stay readable.

    >>> ratio(7.0, 2.0), ratio(1.0, 1e-300)
    ('3.5', 'over a million')
    """
    if not of <= MOST_TIMES * to:
        return "over a million"
    return rounded(float(of) / float(to), places)
