"""Which measurement would help most: how many more formulas would give a value with it."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from roughness.comparison.measures import MEASURES
from roughness.comparison.method import OUTSIDE, Method
from roughness.comparison.streams import FLOOD_PLAIN, Streams


@dataclass(frozen=True, slots=True)
class Missing:
    """A measurement that is not there."""

    measure: str
    """Key of the input."""
    gives: tuple[str, ...]
    """Keys of the methods that need it and have no value without it."""
    alone: int
    """How many of these need nothing else."""
    how: str
    """How to take it."""


def missing(
    methods: Sequence[Method], streams: Streams, others: Mapping[str, str]
) -> tuple[Missing, ...]:
    """Return what is not known of one reach, the most helpful first.

    Methods that would stand outside their domain anyway, as far as it can be told, ask for
    nothing. A pebble count gives all sizes at once and is one measurement.

    Parameters
    ----------
    methods : sequence of Method
    streams : Streams
        One reach.
    others : mapping of str to str
        What else is not known, and the method it alone would give: ``channel_type``, ``stems``.
    """
    lacking: dict[str, dict[str, bool]] = {}
    for method in methods:
        if not (unmet := _unmet(method, streams)) or _hopeless(method, streams):
            continue
        for measure in unmet:
            lacking.setdefault(measure, {})[method.key] = len(unmet) == 1
    for measure, method_key in others.items():
        lacking.setdefault(measure, {})[method_key] = True
    how = {measure.key: measure.how for measure in MEASURES.values()}
    found = [
        Missing(key, tuple(gives), sum(gives.values()), how[key]) for key, gives in lacking.items()
    ]
    return tuple(sorted(found, key=lambda m: (-m.alone, -len(m.gives), m.measure)))


def _unmet(method: Method, streams: Streams) -> set[str]:
    names = [name for name in method.needs if not streams.known(name)]
    return {MEASURES[name].key for name in names}


def _hopeless(method: Method, streams: Streams) -> bool:
    if np.asarray(streams.setting) == FLOOD_PLAIN:
        return True
    unknown = np.asarray(np.nan)
    with np.errstate(all="ignore"):
        codes = [limit.standing(limit.value(streams, unknown)) for limit in method.limits]
    return OUTSIDE in [int(code) for code in codes]
