"""Measurements in, independent estimates of n out, beside what was judged."""

from dataclasses import asdict, dataclass
from typing import Any, Final

from roughness.assessment.measurements import checked_cross_check
from roughness.comparison import (
    METHODS,
    ChannelTypes,
    Missing,
    OtherN,
    PebbleCount,
    Stems,
    Streams,
    from_classes,
    from_stones,
    missing,
    of_channel_type,
    of_grass,
    of_stems,
    other_roads,
)
from roughness.errors import InputError
from roughness.findings import Finding
from roughness.findings.cross_check import Compared, find_cross
from roughness.quantities.ranges import Range
from roughness.survey.cross_check import CrossCheck, Judged

_UNKNOWN: Final = float("nan")
_SIZES: Final = (16, 50, 65, 75, 84, 90)


@dataclass(frozen=True, kw_only=True)
class CrossChecked:
    """The independent estimates of one part of a reach."""

    estimates: tuple[OtherN, ...]
    missing: tuple[Missing, ...]
    """What was not measured, the most helpful first."""
    findings: tuple[Finding, ...]
    pebble_count: PebbleCount | None = None
    """Sizes with their sampling error, where stones were counted."""

    def as_document(self) -> dict[str, Any]:
        """Return what ``roughness crosscheck`` prints."""
        document = asdict(self)
        if self.pebble_count is None:
            del document["pebble_count"]
        return document


def cross_check(given: CrossCheck, table: ChannelTypes, where: str = "crosscheck") -> CrossChecked:
    """Return every independent estimate that the measurements allow, with findings.

    The judged values, where given, are laid beside them and never changed.

    Parameters
    ----------
    given : CrossCheck
    table : ChannelTypes
        Published n of channel types.
    where : str
        How messages name the input.

    Raises
    ------
    InputError
        What is impossible, in one sentence with the field.
    """
    checked_cross_check(given, where)
    count = _count(given, where)
    streams = _streams(given, count)
    estimates = (*other_roads(streams), *_others(given, table, where))
    return CrossChecked(
        estimates=estimates,
        missing=missing(METHODS, streams, _not_given(given)),
        findings=find_cross(
            Compared(
                estimates=estimates,
                base=_range(given.base),
                n=_range(given.n),
                count=count,
                given_mm=tuple(_given_sizes(given).items()),
            )
        ),
        pebble_count=count,
    )


def _count(given: CrossCheck, where: str) -> PebbleCount | None:
    try:
        if given.pebble_count_mm is not None:
            return from_stones(given.pebble_count_mm)
        if given.pebble_tally is not None:
            tally = given.pebble_tally
            return from_classes(
                [row.from_mm for row in tally],
                [row.to_mm for row in tally],
                [row.count for row in tally],
            )
    except InputError as error:
        field = "pebble_tally" if given.pebble_count_mm is None else "pebble_count_mm"
        raise InputError(error.what, where=f"{where}: {field}", wanted=error.wanted) from None
    return None


def _given_sizes(given: CrossCheck) -> dict[int, float]:
    sizes = {percent: getattr(given, f"d{percent}_mm") for percent in _SIZES}
    return {percent: mm for percent, mm in sizes.items() if mm is not None}


def _streams(given: CrossCheck, count: PebbleCount | None) -> Streams:
    """Return the measurements in metres; a size that was given goes before the count's."""
    sizes = {percent: count.size_m(percent) if count else _UNKNOWN for percent in _SIZES}
    sizes |= {percent: mm / 1000 for percent, mm in _given_sizes(given).items()}
    height = _known(given.roughness_height_mm) / 1000
    return Streams(
        setting=given.setting or "",
        slope=_known(given.slope),
        radius=_known(given.hydraulic_radius_m),
        depth=_known(given.depth_m),
        max_depth=_known(given.max_depth_m),
        area=_known(given.area_m2),
        velocity=_known(given.velocity_ms),
        roughness_height=height,
        gradation=_known(given.gradation),
        d16=sizes[16],
        d50=sizes[50],
        d65=sizes[65],
        d75=sizes[75],
        d84=sizes[84],
        d90=sizes[90],
    )


def _known(value: float | None) -> float:
    return _UNKNOWN if value is None else float(value)


def _range(judged: Judged | None) -> Range | None:
    return None if judged is None else Range(judged.low, judged.best, judged.high)


def _others(given: CrossCheck, table: ChannelTypes, where: str) -> list[OtherN]:
    """Return what rests on plants and on the kind of channel."""
    found = []
    if (sample := given.stems) is not None and given.depth_m is not None:
        stems = Stems(
            numbers=[row.number for row in sample.counted],
            diameters_m=[row.diameter_m for row in sample.counted],
            heights_m=[row.height_m for row in sample.counted],
            area_m2=sample.area_m2,
            n_boundary=sample.n_boundary,
            drag=sample.drag,
        )
        found.append(of_stems(stems, given.depth_m))
    if given.retardance is not None:
        found += of_grass(
            given.retardance,
            _known(given.hydraulic_radius_m),
            _known(given.slope),
            _known(given.velocity_ms),
        )
    if given.channel_type is not None:
        row = table.one(given.channel_type, f"{where}: channel_type")
        found.append(of_channel_type(table, row, given.setting))
    return found


def _not_given(given: CrossCheck) -> dict[str, str]:
    lacking = {} if given.channel_type is not None else {"channel_type": "chow-1959"}
    if given.setting == "flood-plain" and given.stems is None:
        lacking["stems"] = "vegetation-density"
    return lacking
