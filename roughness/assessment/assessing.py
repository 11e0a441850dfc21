"""From a handbook and a judgement to an estimate."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

import numpy as np

from roughness import additive, findings, hydraulics
from roughness.additive import Spread
from roughness.assessment.accounting import account_of
from roughness.assessment.estimate import (
    Estimate,
    FactorEstimate,
    HandbookUsed,
    Limits,
    SegmentEstimate,
)
from roughness.assessment.facts_of import facts_of
from roughness.assessment.resolving import Resolved, resolve, shown_note
from roughness.assessment.zones import Zone
from roughness.errors import InputError
from roughness.findings import Finding
from roughness.findings.rule import LEVELS
from roughness.handbook import Handbook
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_value
from roughness.quantities.ranges import Range
from roughness.reasoning import sentences
from roughness.survey.choices import Judgement, Measured
from roughness.survey.words import FACTORS, Factor

# Percentages of the wetted perimeter are paced or guessed: their sum may be off by this.
_PERIMETER_SLACK = 1.0


def assess(handbook: Handbook, judgement: Judgement, where: str = "estimate") -> Estimate:
    """Return the estimate that follows from ``judgement`` by the tables of ``handbook``.

    ``handbook`` is the one whose table serves the setting; where the judgement asked for
    another one, a finding says so.

    Raises
    ------
    InputError
        What is missing, unknown or out of order; one sentence with the field.
    """
    _refuse_impossible(judgement, where)
    zones = _zones(handbook, judgement, where)
    n = _envelope(zones)
    spread, shares = _spread_and_shares(zones, judgement)
    found = _findings(handbook, judgement, zones, n)
    return Estimate(
        n=n,
        spread=spread,
        people=additive.people(n.best),
        factors=tuple(
            _factor_estimate(handbook, zone, factor, share)
            for zone, row in zip(zones, shares, strict=True)
            for factor, share in zip(FACTORS, row, strict=True)
        ),
        findings=found,
        reasoning=sentences(account_of(handbook, judgement, zones, (n, spread), shares, found)),
        handbook=HandbookUsed(
            key=handbook.key, title=handbook.title, year=handbook.year, sha256=handbook.sha256
        ),
        segments=_segment_estimates(zones),
        composite_n=_composite(zones),
        judgement=judgement,
    )


def _refuse_impossible(judgement: Judgement, where: str) -> None:
    if not 0 <= judgement.dependence <= 1:
        raise InputError(
            f"{show_value(judgement.dependence)} is no dependence",
            where=f"{where}: dependence",
            wanted="0 (each factor errs alone) to 1 (all err together)",
        )
    for name in Measured.__dataclass_fields__:
        value = getattr(judgement.measured, name)
        if isinstance(value, float) and (
            value < 0 or (value == 0 and name != "vegetation_height_m")
        ):
            raise InputError(
                f"{show_value(value)} cannot be measured",
                where=f"{where}: measured.{name}",
                wanted="leave out what is unknown",
            )
    along = judgement.measured.slope_along
    if along not in (None, "channel", "valley"):
        raise InputError(
            f"{along!r} is not known here",
            where=f"{where}: measured.slope_along",
            wanted="one of channel, valley",
        )


def _zones(handbook: Handbook, judgement: Judgement, where: str) -> list[Zone]:
    if (judgement.factors is None) == (judgement.segments is None):
        raise InputError(
            "either factors or segments must be there, not both or none",
            where=where,
            wanted='"factors": {"base": {"grade": ...}, ...} for a part with one n',
        )
    if judgement.factors is not None:
        resolved = resolve(handbook, judgement.setting, judgement.factors, f"{where}: factors")
        return [Zone(name=None, percent=100.0, resolved=resolved)]
    return _segment_zones(handbook, judgement, where)


def _segment_zones(handbook: Handbook, judgement: Judgement, where: str) -> list[Zone]:
    segments = judgement.segments or ()
    names = [segment.name.strip().casefold() for segment in segments]
    if len(segments) < 2 or len(set(names)) < len(names) or not all(names):
        raise InputError(
            "segments need at least two entries with different names", where=f"{where}: segments"
        )
    percents = [segment.perimeter_percent for segment in segments]
    if min(percents) <= 0 or abs(sum(percents) - 100) > _PERIMETER_SLACK:
        raise InputError(
            f"the shares of the wetted perimeter add to {show_value(sum(percents))} %",
            where=f"{where}: segments",
            wanted="shares above 0 that add to 100",
        )
    return [
        Zone(
            name=segment.name,
            percent=segment.perimeter_percent,
            resolved=resolve(
                handbook,
                judgement.setting,
                segment.factors,
                f"{where}: segment {segment.name}",
            ),
        )
        for segment in segments
    ]


def _envelope(zones: Sequence[Zone]) -> Range:
    if len(zones) == 1:
        return additive.envelope(zones[0].ranges)
    return additive.envelope_of_segments(
        [zone.columns for zone in zones], [zone.percent for zone in zones]
    )


def _spread_and_shares(
    zones: Sequence[Zone], judgement: Judgement
) -> tuple[Spread, list[list[float]]]:
    columns = [zone.columns for zone in zones]
    if len(zones) == 1:
        spread = additive.spread(
            *columns[0], shape=judgement.shape, dependence=judgement.dependence
        )
        shares = additive.shares_of_variance(*columns[0], shape=judgement.shape)
        return spread, [[float(share) for share in shares]]
    percents = [zone.percent for zone in zones]
    spread = additive.spread_of_segments(
        columns, percents, shape=judgement.shape, dependence=judgement.dependence
    )
    rows = additive.shares_of_segments(columns, percents, shape=judgement.shape)
    return spread, [[float(share) for share in row] for row in rows]


def _factor_estimate(
    handbook: Handbook, zone: Zone, factor: Factor, share: float
) -> FactorEstimate:
    entry = zone.resolved[factor]
    published = entry.published
    return FactorEstimate(
        factor=factor,
        symbol=handbook.symbols[factor],
        grade=entry.grade_key,
        low=entry.range.low,
        best=entry.range.best,
        high=entry.range.high,
        published=Limits(low=published.low, high=published.high) if published else None,
        share_of_variance=share,
        basis="measured" if entry.measured else "grade",
        source=entry.cited,
        note=shown_note(entry.choice),
        segment=zone.name,
    )


def _findings(
    handbook: Handbook, judgement: Judgement, zones: Sequence[Zone], n: Range
) -> tuple[Finding, ...]:
    def found(resolved: Mapping[Factor, Resolved], of: Range, segment: str | None) -> list[Finding]:
        facts = facts_of(
            handbook,
            judgement.handbook,
            judgement.setting,
            resolved,
            judgement.measured,
            of,
            segment,
        )
        return findings.find(facts)[0]

    of_zones = [found(z.resolved, additive.envelope(z.ranges), z.name) for z in zones]
    each = _told_once(of_zones, [f"{printable(z.name or '')}: " for z in zones])
    whole = found({}, n, None) if len(zones) > 1 else []
    return tuple(sorted(dict.fromkeys(each + whole), key=lambda f: LEVELS.index(f.level)))


def _told_once(of_zones: Sequence[Sequence[Finding]], names: Sequence[str]) -> list[Finding]:
    """Return the findings of all segments; what each of them says alike loses its name."""
    bare = [
        [replace(finding, says=finding.says.removeprefix(name)) for finding in of_zone]
        for of_zone, name in zip(of_zones, names, strict=True)
    ]
    of_all = set.intersection(*map(set, bare)) if len(bare) > 1 else set()
    return [
        plain if plain in of_all else named
        for of_zone, plains in zip(of_zones, bare, strict=True)
        for named, plain in zip(of_zone, plains, strict=True)
    ]


def _segment_estimates(zones: Sequence[Zone]) -> tuple[SegmentEstimate, ...] | None:
    if len(zones) == 1:
        return None
    return tuple(
        SegmentEstimate(
            name=zone.name or "",
            perimeter_percent=zone.percent,
            n=additive.envelope(zone.ranges),
        )
        for zone in zones
    )


def _composite(zones: Sequence[Zone]) -> dict[str, float] | None:
    if len(zones) == 1:
        return None
    n = np.array([additive.envelope(zone.ranges).best for zone in zones])
    percents = np.array([zone.percent for zone in zones])
    return {
        "horton-einstein": float(hydraulics.horton_einstein(n, percents)),
        "pavlovskii": float(hydraulics.pavlovskii(n, percents)),
        "perimeter-mean": float(hydraulics.perimeter_mean(n, percents)),
    }
