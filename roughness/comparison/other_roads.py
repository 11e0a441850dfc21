"""The independent estimates of one reach, each with its domain in words."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from roughness.comparison.channel_types import ChannelType, ChannelTypes
from roughness.comparison.method import DOMAINS, Domain, Includes, Method
from roughness.comparison.methods import METHODS
from roughness.comparison.streams import Streams
from roughness.survey.words import Setting


@dataclass(frozen=True, kw_only=True)
class OtherN:
    """One independent estimate."""

    method: str
    n: float | None
    """None where the formula gives no value here, or the table no usual one."""
    low: float | None = None
    high: float | None = None
    """Limits, where the publication gives some."""
    domain: Domain
    why: str
    includes: Includes
    about: str
    """What the value holds."""
    error_percent: float | None = None
    """Published error, percent of n."""
    source: str
    provenance: str
    """Whether its figures were seen, seen second hand, or are from memory."""


def other_roads(streams: Streams, methods: Sequence[Method] = METHODS) -> tuple[OtherN, ...]:
    """Return the estimate of every method whose measurements are known, for one reach."""
    return tuple(
        _along(method, streams)
        for method in methods
        if all(streams.known(name) for name in method.needs)
    )


def _along(method: Method, streams: Streams) -> OtherN:
    n = method.n(streams)
    value = float(n)
    return OtherN(
        method=method.key,
        n=None if np.isnan(value) else value,
        domain=DOMAINS[int(method.domain(streams, n))],
        why=method.why(streams, value),
        includes=method.includes,
        about=method.about,
        error_percent=method.error_percent,
        source=method.source,
        provenance=method.provenance,
    )


def of_channel_type(table: ChannelTypes, row: ChannelType, setting: Setting | None) -> OtherN:
    """Return the published values of a channel type; another setting's row is outside."""
    fits = setting in (None, row.setting)
    why = "as far as these words describe it" if fits else f"the row is one of a {row.setting}"
    return OtherN(
        method=table.key,
        n=row.normal,
        low=row.low,
        high=row.high,
        domain="inside" if fits else "outside",
        why=f"{row.label}: {why}",
        includes="whole reach",
        about="least, usual and greatest n of a type of channel",
        source=table.citation,
        provenance=row.provenance,
    )
