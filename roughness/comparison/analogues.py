"""The measured streams most alike to a reach, with the reasons: shown beside n, never as n."""

from collections.abc import Iterable
from dataclasses import dataclass

from roughness.comparison.likeness import Likeness, ReachFacts, likeness
from roughness.comparison.measured_streams import Event, MeasuredStream


@dataclass(frozen=True, kw_only=True)
class Analogue:
    """One measured stream beside a reach, at its event most alike."""

    stream: MeasuredStream
    event: Event
    likeness: float
    """0 to 1."""
    shared: int
    """Criteria known of both, of five."""
    reasons: tuple[str, ...]

    @property
    def n(self) -> float:
        """Measured n of that event."""
        return self.event.n


@dataclass(frozen=True, kw_only=True)
class Analogues:
    """The streams of a catalogue beside a reach."""

    alike: tuple[Analogue, ...]
    """The most alike first."""
    unknown: tuple[MeasuredStream, ...]
    """Of the same setting, without anything to compare: their n alone is known."""


def analogues(here: ReachFacts, catalogue: Iterable[MeasuredStream]) -> Analogues:
    """Return the measured streams of the reach's setting, the most alike first.

    Parameters
    ----------
    here : ReachFacts
        What is known of the reach.
    catalogue : iterable of MeasuredStream
        Published streams and the user's own.

    Returns
    -------
    Analogues
        Equal likeness goes by what more is known of, then by key: the same on every run.
    """
    alike: list[Analogue] = []
    unknown: list[MeasuredStream] = []
    for stream in catalogue:
        if stream.setting != here.setting:
            continue
        found = _nearest_event(here, stream)
        if found is None:
            unknown.append(stream)
        else:
            alike.append(found)
    alike.sort(key=lambda one: (-one.likeness, -one.shared, one.stream.key))
    return Analogues(alike=tuple(alike), unknown=tuple(unknown))


def facts_of_event(stream: MeasuredStream, event: Event) -> ReachFacts:
    """Return what likeness goes by of one measured flow."""
    return ReachFacts(
        setting=stream.setting,
        bed=stream.bed,
        d50_mm=stream.d50_mm,
        slope=event.slope,
        hydraulic_radius_m=event.hydraulic_radius_m,
        depth_m=event.depth_m,
        plants=stream.plants if event.plants is None else event.plants,
        growth=event.growth,
    )


def _nearest_event(here: ReachFacts, stream: MeasuredStream) -> Analogue | None:
    best: tuple[Likeness, Event] | None = None
    for event in stream.events:
        found = likeness(here, facts_of_event(stream, event))
        if found is not None and (best is None or _order(found) > _order(best[0])):
            best = found, event
    if best is None:
        return None
    found, event = best
    return Analogue(
        stream=stream,
        event=event,
        likeness=found.value,
        shared=found.shared,
        reasons=found.reasons,
    )


def _order(found: Likeness) -> tuple[float, int]:
    return found.value, found.shared
