"""Independent estimates of n, with the shipped table of channel types."""

from functools import cache

from roughness.assessment.cross_checking import CrossChecked, cross_check
from roughness.assessment.measurements import read_cross_check
from roughness.comparison import ChannelTypes, parse_channel_types
from roughness.shelf.facts import CHANNEL_TYPES, shipped_facts
from roughness.survey.cross_check import CrossCheck


@cache
def channel_types() -> ChannelTypes:
    """Return the published n of channel types, read once."""
    return parse_channel_types(shipped_facts(CHANNEL_TYPES), CHANNEL_TYPES)


def crosschecked(given: CrossCheck | bytes, where: str = "crosscheck") -> CrossChecked:
    """Return the independent estimates for measurements, typed or as JSON text.

    Raises
    ------
    InputError
        The first thing that is wrong, in one sentence.
    """
    if isinstance(given, bytes):
        given = read_cross_check(given, where)
    return cross_check(given, channel_types(), where)
