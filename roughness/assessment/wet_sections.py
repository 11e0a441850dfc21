"""The sections of a measured flow as they were wetted, or why one cannot have been."""

from math import pi
from typing import Final

from roughness.assessment.section_bed import bed_of
from roughness.errors import InputError
from roughness.hydraulics.geometry import water_below
from roughness.quantities.printing import rounded, show_value
from roughness.survey.measured_flow import FlowSection, WetSection
from roughness.survey.sections import Section

# Faster than any river that was gauged: common practice, no source.
_FASTEST_MS: Final = 20.0
# A natural section with flow reversed at its edges has 2 to 3: common practice, no source.
_LARGEST_ALPHA: Final = 10.0


def wet_section(section: FlowSection, discharge: float, place: str) -> WetSection:
    """Return area, perimeter and width of a section at the measured flow.

    Parameters
    ----------
    section : FlowSection
        With area and perimeter, or with points.
    discharge : float
        m3/s, above 0.
    place : str
        Names the section in messages.

    Raises
    ------
    InputError
        What no section can be: one sentence with the field and what would be right.
    """
    found = _given(section, place) if section.points is None else _from_points(section, place)
    if not 1 <= section.alpha <= _LARGEST_ALPHA:
        raise InputError(
            f"alpha {show_value(section.alpha)} is no velocity head coefficient",
            where=f"{place}, alpha",
            wanted=f"1 to {show_value(_LARGEST_ALPHA)}",
        )
    if discharge / found.area_m2 > _FASTEST_MS:
        raise InputError(
            f"{show_value(discharge)} m3/s through {rounded(found.area_m2, 2)} m2 is a velocity of"
            f" {rounded(discharge / found.area_m2, 0)} m/s",
            where=place,
            wanted="check that the discharge is in m3/s and the area in m2",
        )
    return found


def above_zero(value: float, where: str, due: str) -> None:
    """Refuse what is not above 0."""
    if not value > 0:
        raise InputError(f"{show_value(value)} is not above 0", where=where, wanted=f"{due} is due")


def _given(section: FlowSection, place: str) -> WetSection:
    area, perimeter = section.area_m2, section.wetted_perimeter_m
    if area is None or perimeter is None:
        name = "area_m2" if area is None else "wetted_perimeter_m"
        raise InputError(
            "it is missing",
            where=f"{place}, {name}",
            wanted="area_m2 and wetted_perimeter_m are due, or points with a water level",
        )
    above_zero(area, f"{place}, area_m2", "the wetted area in m2; a dry section carries no flow:")
    above_zero(perimeter, f"{place}, wetted_perimeter_m", "the wetted perimeter in m")
    # Of all beds with a wetted perimeter, the half circle holds the largest area.
    if area > perimeter**2 / (2 * pi) * (1 + 1e-9):
        raise InputError(
            f"no bed of {show_value(perimeter)} m holds {show_value(area)} m2",
            where=f"{place}, wetted_perimeter_m",
            wanted=f"at least {rounded((2 * pi * area) ** 0.5, 2)} m, or a smaller area",
        )
    if section.top_width_m is not None:
        _check_width(section.top_width_m, perimeter, f"{place}, top_width_m")
    return _wet(section, area, perimeter, section.top_width_m)


def _check_width(width: float, perimeter: float, place: str) -> None:
    above_zero(width, place, "the width of the water in m")
    if width > perimeter:
        raise InputError(
            f"the water is {show_value(width)} m wide and its bed {show_value(perimeter)} m long",
            where=place,
            wanted="at most the wetted perimeter",
        )


def _from_points(section: FlowSection, place: str) -> WetSection:
    for name in ("area_m2", "wetted_perimeter_m", "top_width_m"):
        if getattr(section, name) is not None:
            raise InputError(
                "it stands beside points", where=f"{place}, {name}", wanted="leave one of them out"
            )
    level = section.water_level_m
    if level is None:
        raise InputError(
            "it is missing", where=f"{place}, water_level_m", wanted="points need a water level"
        )
    bed = bed_of(Section(slope=1.0, parts=(), points=section.points), place)
    _check_level(level, bed.datum, bed.datum + bed.top, f"{place}, water_level_m")
    water = water_below(bed.x, bed.height, level - bed.datum)
    return _wet(section, water.area, water.perimeter, water.width)


def _check_level(level: float, lowest: float, banks: float, place: str) -> None:
    if level <= lowest:
        raise InputError(
            f"{show_value(level)} m is not above the lowest point, {show_value(lowest)} m",
            where=place,
            wanted="a dry section carries no flow: check level and datum",
        )
    if level > banks:
        raise InputError(
            f"{show_value(level)} m is above the lower end of the section, {show_value(banks)} m",
            where=place,
            wanted="survey the section up to the water on both sides",
        )


def _wet(section: FlowSection, area: float, perimeter: float, width: float | None) -> WetSection:
    return WetSection(
        distance_m=section.distance_m or 0.0,
        area_m2=area,
        wetted_perimeter_m=perimeter,
        water_level_m=section.water_level_m,
        alpha=section.alpha,
        top_width_m=width,
    )
