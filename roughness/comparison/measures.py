"""What can be measured for an independent estimate, and how it is taken in the field."""

from dataclasses import dataclass
from typing import Final


@dataclass(frozen=True, slots=True)
class Measure:
    """One thing to measure."""

    key: str
    """As the input of a cross-check names it."""
    how: str
    """How to take it, in one or two sentences."""


_COUNT: Final = (
    "Pace over the bed and pick up the stone under each step with eyes averted, 100 or more; "
    "note the middle axis of each. The count gives d16 to d90 with their sampling error."
)
MEASURES: Final[dict[str, Measure]] = {
    "d50": Measure("pebble_count_mm", _COUNT),
    "d65": Measure("pebble_count_mm", _COUNT),
    "d75": Measure("pebble_count_mm", _COUNT),
    "d84": Measure("pebble_count_mm", _COUNT),
    "d90": Measure("pebble_count_mm", _COUNT),
    "radius": Measure(
        "hydraulic_radius_m",
        "Survey one cross-section to the water level or flood mark meant: its flow area over its "
        "wetted perimeter. In a wide channel the mean depth is close to it.",
    ),
    "slope": Measure(
        "slope",
        "Level the water surface over ten widths or more, from riffle head to riffle head: the "
        "fall over the distance along the channel.",
    ),
    "area": Measure(
        "area_m2",
        "Survey one cross-section to the water level meant; the area between bed and water.",
    ),
    "roughness_height": Measure(
        "roughness_height_mm",
        "Take it from a measured flow in the same reach, or for a lining from its maker.",
    ),
    "sorting": Measure(
        "gradation",
        "Sieve a sample of the bed's sand: the square root of d84 over d16.",
    ),
    "stems": Measure(
        "stems",
        "Count the stems by diameter in two or three sample areas of about 30 m across the flow "
        "by 15 m along it, at the height of the water.",
    ),
    "channel_type": Measure(
        "channel_type",
        "Say in words what kind of channel it is; a row of the published table is looked up.",
    ),
}
