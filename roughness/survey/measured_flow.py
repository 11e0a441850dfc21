"""A flow that was measured in a reach, with the sections and the water surface it left."""

from dataclasses import dataclass
from typing import Any, ClassVar

from roughness.survey.choices import STRICT


@dataclass(frozen=True, kw_only=True)
class FlowSection:
    """One section of the reach at the measured flow: area and perimeter, or its points."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    distance_m: float | None = None
    """Along the stream; growing or falling downstream. Due where there are two sections or more."""
    area_m2: float | None = None
    wetted_perimeter_m: float | None = None
    points: tuple[tuple[float, float], ...] | None = None
    """In place of both and of the width: distance and height of the bed, m, from left to right
    looking downstream."""
    water_level_m: float | None = None
    """Above any datum. Due with points, and where there are two sections or more."""
    alpha: float = 1.0
    """Velocity head coefficient, 1 or more."""
    top_width_m: float | None = None
    """Width of the water surface; Froude number and mean depth follow from it."""


@dataclass(frozen=True, kw_only=True)
class WetSection:
    """One section as it was wetted, whichever way it was handed in."""

    distance_m: float
    """0 where there is one section alone."""
    area_m2: float
    wetted_perimeter_m: float
    water_level_m: float | None
    alpha: float
    top_width_m: float | None


@dataclass(frozen=True, kw_only=True)
class MeasurementErrors:
    """One standard deviation of each measurement; what is unknown is None."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    discharge_percent: float | None = None
    water_level_m: float | None = None
    """Of the water level at one section."""
    area_percent: float | None = None
    """Of the wetted areas, at all sections together."""
    slope_percent: float | None = None
    """With one section and a slope alone."""


@dataclass(frozen=True, kw_only=True)
class MeasuredFlow:
    """What ``roughness backcalc`` reads: a discharge and the sections it passed."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    discharge_m3s: float
    sections: tuple[FlowSection, ...]
    """From upstream to downstream."""
    slope: float | None = None
    """Of the energy line, with one section alone: the flow is taken as uniform."""
    expansion_loss: float = 0.5
    """Part of a falling velocity head that is lost."""
    contraction_loss: float = 0.0
    """Part of a growing velocity head that is lost."""
    errors: MeasurementErrors = MeasurementErrors()


@dataclass(frozen=True, kw_only=True)
class CheckedFlow:
    """A measured flow that can be: what n is found from."""

    discharge_m3s: float
    sections: tuple[WetSection, ...]
    slope: float | None
    """There with one section alone."""
    expansion_loss: float
    contraction_loss: float
    errors: MeasurementErrors
