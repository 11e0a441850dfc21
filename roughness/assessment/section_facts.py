"""What the rules about a section look at, gathered from the solved section."""

from collections.abc import Mapping, Sequence

import numpy as np

from roughness.assessment.section_bed import Bed
from roughness.assessment.section_document import Flow
from roughness.assessment.section_parts import Laid
from roughness.assessment.section_water import DividedWater
from roughness.findings.over_section import PartFacts, SectionFacts
from roughness.hydraulics.dividing import benches
from roughness.hydraulics.flow_numbers import is_fully_rough
from roughness.hydraulics.geometry import lines_between, separate_waters, within
from roughness.quantities.ranges import Range


def facts_of(
    bed: Bed,
    laid: Laid,
    water: DividedWater,
    *,
    level: float,
    flow: Flow,
    slope: float,
    normal: Sequence[float],
    critical: Sequence[float],
    part_composites: Sequence[Mapping[str, float] | None],
) -> SectionFacts:
    """Return the facts of a section at the level of the best n (a height over its lowest point)."""
    ns = [water.part_n(np.asarray(level), case) for case in ("low", "best", "high")]
    return SectionFacts(
        slope=slope,
        froude=flow.froude,
        alpha=flow.alpha,
        fully_rough=is_fully_rough(flow.equivalent_n, flow.hydraulic_radius_m, slope),
        equivalent_n=flow.equivalent_n,
        overhangs=bed.overhangs,
        waters=separate_waters(bed.height, level),
        normal_levels=tuple(height + bed.datum for height in normal),
        critical_depths=tuple(critical),
        parts=tuple(
            _part(laid, i, [float(n[i]) for n in ns], bed, level, part_composites[i])
            for i in range(len(laid.parts))
        ),
    )


def _part(
    laid: Laid,
    index: int,
    n: list[float],
    bed: Bed,
    level: float,
    composite: Mapping[str, float] | None,
) -> PartFacts:
    part = laid.parts[index]
    return PartFacts(
        name=part.part.name,
        n=Range(*n) if n[1] > 0 else None,
        composite=composite if composite and len(part.stretches) > 1 else {},
        bench=_bench(bed, part.stretches[0].left, part.stretches[-1].right, level),
        n_unused=part.n_unused,
    )


def _bench(
    bed: Bed, left: float, right: float, level: float
) -> tuple[float, float, float, float] | None:
    """Return the widest shallow plain inside a part; under overhangs none is looked for."""
    if bed.overhangs:
        return None
    lines = within(lines_between(bed.x, bed.height), left, right)
    kept = np.flatnonzero((lines.x0 != lines.x1) | (lines.z0 != lines.z1))
    if kept.size == 0:
        return None
    x = np.append(lines.x0[kept], lines.x1[kept[-1]])
    found = benches(x, np.append(lines.z0[kept], lines.z1[kept[-1]]), level)
    widest = max(found, key=lambda bench: bench.width, default=None)
    return (widest.at, widest.depth, widest.width, widest.deepest) if widest else None
