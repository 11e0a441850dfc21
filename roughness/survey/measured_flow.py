"""A flow that was measured in a reach, with the sections and the water surface it left."""

from dataclasses import dataclass
from typing import Any, ClassVar

from roughness.survey.choices import STRICT


@dataclass(frozen=True, kw_only=True)
class FlowSection:
    """One section of the reach at the measured flow."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    distance_m: float | None = None
    """Along the stream; growing or falling downstream. Due where there are two sections or more."""
    area_m2: float
    wetted_perimeter_m: float
    water_level_m: float | None = None
    """Above any datum. Due where there are two sections or more."""
    alpha: float = 1.0
    """Velocity head coefficient, 1 or more."""
    top_width_m: float | None = None
    """Width of the water surface; Froude number and mean depth follow from it."""


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
