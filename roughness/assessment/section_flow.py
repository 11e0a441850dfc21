"""What flows through a section: depth, velocity and composite n at low, best and high n."""

from dataclasses import dataclass
from functools import partial
from typing import Final

import numpy as np
from numpy.typing import NDArray

from roughness.assessment.section_bed import Bed, bed_of
from roughness.assessment.section_document import Flow, PartFlow, PartOfSection, SectionFlow
from roughness.assessment.section_facts import facts_of
from roughness.assessment.section_parts import Laid, lay_parts
from roughness.assessment.section_water import DividedWater
from roughness.errors import InputError
from roughness.findings.over_section import find_in_section
from roughness.hydraulics.composite_relations import RELATIONS, composite_n, segments_of
from roughness.hydraulics.conveyance import (
    equivalent_n,
    momentum_coefficient,
    velocity_head_coefficient,
)
from roughness.hydraulics.critical_depth import critical_levels, specific_energy
from roughness.hydraulics.flow_numbers import froude, reynolds
from roughness.hydraulics.geometry import ratio
from roughness.hydraulics.normal_depth import normal_levels
from roughness.quantities.printing import rounded, show_value
from roughness.survey.sections import Section

Floats = NDArray[np.float64]

# Less than this, in m or m3/s, is no water.
LEAST: Final = 1e-9
CASES: Final = ("low", "best", "high")


def flow_in(section: Section, where: str = "section") -> SectionFlow:
    """Return depth or discharge, velocity and composite n of a section.

    Parameters
    ----------
    section : Section
        What was handed in.
    where : str
        How messages name the input.

    Returns
    -------
    SectionFlow
        low and high only where an n has a range.

    Raises
    ------
    InputError
        The first thing that is wrong, in one sentence.
    """
    _refuse_numbers(section, where)
    bed = bed_of(section, where)
    laid = lay_parts(section, bed, where)
    water = DividedWater(bed, laid)
    solved = _Solved(section, bed, laid, water, where)
    cases = [case for case in CASES if laid.has_range or case == "best"]
    flows = {case: solved.flow(case) for case in cases}
    parts = tuple(solved.part(i, cases) for i in range(len(laid.parts)))
    facts = facts_of(
        bed,
        laid,
        water,
        level=solved.height("best"),
        flow=flows["best"],
        slope=section.slope,
        normal=max((solved.normal[case] for case in solved.normal), key=len, default=()),
        critical=solved.critical_heights(flows["best"].discharge_m3s),
        part_composites=[part.composite_n for part in parts],
    )
    return SectionFlow(
        low=flows.get("low"),
        best=flows["best"],
        high=flows.get("high"),
        composite_n=parts[0].composite_n if len(parts) == 1 else None,
        parts=parts,
        findings=find_in_section(facts),
    )


@dataclass(slots=True)
class _Case:
    """One case of n, solved."""

    height: Floats
    discharge: float


class _Solved:
    """A section with its heights of water over the lowest point, case by case."""

    def __init__(
        self, section: Section, bed: Bed, laid: Laid, water: DividedWater, where: str
    ) -> None:
        self._bed, self._laid, self._water = bed, laid, water
        self._slope, self._where = section.slope, where
        self.normal: dict[str, tuple[float, ...]] = {}
        cases = [case for case in CASES if laid.has_range or case == "best"]
        if section.discharge_m3s is not None:
            self._cases = {case: self._at_discharge(section, case) for case in cases}
        else:
            height = np.asarray(_height_of(section, bed, where))
            self._cases = {
                case: _Case(height, self._carried(height, case) * self._slope**0.5)
                for case in cases
            }

    def height(self, case: str) -> float:
        return float(self._cases[case].height)

    def _carried(self, height: Floats, case: str) -> float:
        return float(self._water.conveyances(height, case).sum(axis=-1))

    def _at_discharge(self, section: Section, case: str) -> _Case:
        discharge = section.discharge_m3s
        assert discharge is not None
        found = normal_levels(
            lambda level: np.asarray(self._water.conveyances(level, case).sum(axis=-1)),
            discharge,
            self._slope,
            self._water.grid,
            self._water.jumps,
        )
        self.normal[case] = tuple(found.at[np.isfinite(found.at)].tolist())
        if found.count == 0:
            raise self._too_much(discharge, case)
        return _Case(np.asarray(found.highest), discharge)

    def _too_much(self, discharge: float, case: str) -> InputError:
        most = self._carried(np.asarray(self._bed.top), case) * self._slope**0.5
        return InputError(
            f"no depth carries {show_value(discharge)} m3/s with the {case} n: at the lower end of"
            f" the section, {rounded(self._bed.top + self._bed.datum, 2)} m, it is"
            f" {rounded(most, 2)} m3/s",
            where=f"{self._where}: discharge_m3s",
            wanted="survey the section further up its lower bank, or look at slope and n",
        )

    def critical_heights(self, discharge: float) -> tuple[float, ...]:
        """Return every critical depth, ascending."""
        found = critical_levels(self._water.whole, discharge, self._water.grid, self._water.jumps)
        heights = found.at[np.isfinite(found.at)]
        # A trickle may be too shallow for its area to be told from none.
        return tuple(heights[np.asarray(self._water.whole(heights).area) > 0].tolist())

    def _critical(self, discharge: float) -> float | None:
        """Return the critical depth of least specific energy."""
        depths = self.critical_heights(discharge)
        if not depths:
            return None
        area = self._water.whole(np.array(depths)).area
        return depths[int(np.argmin(specific_energy(depths, area, discharge)))]

    def flow(self, case: str) -> Flow:
        height, discharge = self._cases[case].height, self._cases[case].discharge
        parts, whole = self._water.parts(height), self._water.whole(height)
        carried = self._water.conveyances(height, case)
        velocity = discharge / float(whole.area)
        return Flow(
            water_level_m=float(height) + self._bed.datum,
            depth_m=float(height),
            area_m2=float(whole.area),
            wetted_perimeter_m=float(whole.perimeter),
            hydraulic_radius_m=whole.radius,
            mean_depth_m=whole.mean_depth,
            top_width_m=float(whole.width),
            discharge_m3s=discharge,
            velocity_ms=velocity,
            froude=froude(velocity, whole.area, whole.width),
            reynolds=reynolds(velocity, whole.radius),
            conveyance_m3s=float(carried.sum()),
            alpha=velocity_head_coefficient(carried, parts.area),
            beta=momentum_coefficient(carried, parts.area),
            critical_depth_m=self._critical(discharge),
            equivalent_n=equivalent_n(carried, parts.area, parts.perimeter),
        )

    def part(self, index: int, cases: list[str]) -> PartOfSection:
        given = self._laid.parts[index].part
        flows = {case: self._part_flow(index, case) for case in cases}
        return PartOfSection(
            name=given.name,
            setting=given.setting,
            from_=given.from_,
            to=given.to,
            low=flows.get("low"),
            best=flows["best"],
            high=flows.get("high"),
            composite_n=self._composite(index),
        )

    def _part_flow(self, index: int, case: str) -> PartFlow:
        height = self._cases[case].height
        parts = self._water.parts(height)
        of_part = partial(np.take, indices=index, axis=-1)
        area, perimeter, width = map(of_part, (parts.area, parts.perimeter, parts.width))
        n = float(of_part(self._water.part_n(height, case)))
        carried = float(of_part(self._water.conveyances(height, case)))
        return PartFlow(
            n=n if n > 0 else None,
            area_m2=float(area),
            wetted_perimeter_m=float(perimeter),
            hydraulic_radius_m=ratio(area, perimeter),
            mean_depth_m=ratio(area, width),
            top_width_m=float(width),
            conveyance_m3s=carried,
            discharge_m3s=carried * self._slope**0.5,
            velocity_ms=ratio(carried * self._slope**0.5, area),
        )

    def _composite(self, index: int) -> dict[str, float] | None:
        """Return the best n of a part by every relation; None where it is dry."""
        stretches = self._water.stretches(self._cases["best"].height)
        of_part = self._water.of_part(index)
        area, perimeter, width = (
            np.asarray(v)[..., of_part]
            for v in (stretches.area, stretches.perimeter, stretches.width)
        )
        if not (perimeter.sum() > 0 and area.sum() > 0):
            return None
        n = self._water.n["best"][of_part]
        if n.size == 1:
            return dict.fromkeys(RELATIONS, float(n[0]))
        found = composite_n(segments_of(n, area, perimeter, ratio(area, width)))
        return {key: float(value) for key, value in found.items() if np.isfinite(value)}


def _refuse_numbers(section: Section, where: str) -> None:
    _refuse_slope(section.slope, f"{where}: slope")
    known = {
        key: getattr(section, key)
        for key in ("discharge_m3s", "water_level_m", "depth_m")
        if getattr(section, key) is not None
    }
    if len(known) != 1:
        met = f"there are {' and '.join(known)}" if known else "what flows is not said"
        raise InputError(
            met, where=where, wanted="one of discharge_m3s, water_level_m and depth_m is due"
        )
    for key in ("discharge_m3s", "depth_m"):
        if key in known and not known[key] >= LEAST:
            raise InputError(
                f"it is {show_value(known[key])}", where=f"{where}: {key}", wanted="above 0 is due"
            )


def _refuse_slope(slope: float, place: str) -> None:
    if slope <= 0:
        kind = "0: water does not flow" if slope == 0 else f"{show_value(slope)}: it rises"
        raise InputError(
            f"the slope is {kind}",
            where=place,
            wanted="uniform flow needs a fall along the stream, in m per m above 0",
        )
    if slope > 1:
        raise InputError(
            f"a slope of {show_value(slope)} is steeper than 45 degrees",
            where=place,
            wanted=f"m per m is due; {show_value(slope)} per mille is {show_value(slope / 1000)}",
        )


def _height_of(section: Section, bed: Bed, where: str) -> float:
    """Return the given water's height over the lowest point."""
    if section.depth_m is not None:
        height, place = section.depth_m, f"{where}: depth_m"
    else:
        assert section.water_level_m is not None
        height, place = section.water_level_m - bed.datum, f"{where}: water_level_m"
    if height < LEAST:
        raise InputError(
            f"the section is dry at {show_value(section.water_level_m or 0.0)} m",
            where=place,
            wanted=f"its lowest point lies at {show_value(bed.datum)} m",
        )
    if height > bed.top:
        raise InputError(
            f"water at {show_value(round(height + bed.datum, 9))} m stands above the lower end of"
            f" the section, {show_value(round(bed.top + bed.datum, 9))} m",
            where=place,
            wanted="survey the section further up its lower bank",
        )
    return height
