"""All roads to n from grain size, slope and depth, in the order in which they are shown."""

from typing import Final

from roughness.comparison import bed_methods as bed
from roughness.comparison import reach_methods as reach
from roughness.comparison.method import Method

METHODS: Final[tuple[Method, ...]] = (
    bed.STRICKLER,
    bed.STRICKLER_0342,
    bed.MEYER_PETER_MUELLER,
    bed.LANE_CARLSON,
    bed.STONE_VELOCITY,
    bed.STONE_CAPACITY,
    bed.WALL,
    bed.LIMERINOS,
    bed.LIMERINOS_D50,
    bed.BRAY_D50,
    bed.BRAY_D65,
    bed.BRAY_D90,
    bed.BRAY_LOG,
    bed.HEY,
    bed.GRIFFITHS,
    bed.BATHURST,
    bed.GRAVEL_POWER,
    bed.GRAVEL_LOG,
    bed.FERGUSON,
    reach.BROWNLIE_LOWER,
    reach.BROWNLIE_UPPER,
    reach.RICKENMANN_RECKING,
    reach.JARRETT,
    reach.SAUER,
    reach.BRAY_SLOPE,
    reach.DINGMAN_SHARMA,
    reach.LACEY,
)
