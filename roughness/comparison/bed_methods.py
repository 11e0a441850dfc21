"""Roads to the base value of beds of stones: where each holds and what it includes."""

from dataclasses import replace
from typing import Final

import numpy as np

from roughness.comparison import grain, gravel
from roughness.comparison.constants import FOOT, Numbers, numbers
from roughness.comparison.limits import (
    GRAVEL,
    MM,
    SUBCRITICAL,
    deep_over,
    grains_deep,
    power_holds_over,
    radius_between,
    slope_between,
)
from roughness.comparison.method import Limit, Method
from roughness.comparison.streams import Streams
from roughness.hydraulics.rough_walls import n_from_roughness_height

_STREAMS_OF: Final = "made from clean gravel reaches; holds some resistance of banks and shape"
_GRAINS_OF: Final = "the resistance of the grains alone"


def _hey_shape(streams: Streams) -> Numbers:
    shape = gravel.hey_shape(streams.radius, streams.max_depth)
    return np.where(np.isnan(shape), 11.1, shape)


STRICKLER = Method(
    key="strickler-1923",
    formula=lambda s: grain.strickler(s.d50),
    needs=("d50",),
    limits=(GRAVEL, power_holds_over("d50")),
    includes="grain",
    about=f"{_GRAINS_OF}; the form d50^(1/6)/21.1 (m)",
    source="Strickler 1923",
    provenance="seen second hand",
)
STRICKLER_0342 = replace(
    STRICKLER,
    key="strickler-0342-ft",
    formula=lambda s: grain.strickler_0342(s.d50),
    about=f"{_GRAINS_OF}; the form 0.0342 d50^(1/6) (ft), 12 % below the other one",
    source="second form under the name of Strickler 1923",
    provenance="memory",
)
MEYER_PETER_MUELLER = Method(
    key="meyer-peter-mueller-1948",
    formula=lambda s: grain.meyer_peter_mueller(s.d90),
    needs=("d90",),
    limits=(GRAVEL, power_holds_over("d90")),
    includes="grain",
    about=f"{_GRAINS_OF}; armoured beds of sand and gravel",
    source="Meyer-Peter & Mueller 1948",
    provenance="seen second hand",
)
LANE_CARLSON = Method(
    key="lane-carlson-1953",
    formula=lambda s: grain.lane_carlson(s.d75),
    needs=("d75",),
    limits=(
        GRAVEL,
        Limit(
            of="the d75", value=lambda s, _: numbers(s.d75), low=64 * MM, unit=" mm", shown_in=MM
        ),
        power_holds_over("d75"),
    ),
    includes="grain",
    about=f"{_GRAINS_OF}; canals lined with cobbles",
    source="Lane & Carlson 1953",
    provenance="memory",
)
STONE_VELOCITY = Method(
    key="em-1110-2-1601-velocity",
    formula=lambda s: grain.stone_bed_velocity(s.d90),
    needs=("d90",),
    limits=(GRAVEL, power_holds_over("d90")),
    includes="grain",
    about=f"{_GRAINS_OF}; riprap and gravel, for velocity and size of stone",
    source="USACE EM 1110-2-1601, 1994, chapter 5",
    provenance="memory",
)
STONE_CAPACITY = replace(
    STONE_VELOCITY,
    key="em-1110-2-1601-capacity",
    formula=lambda s: grain.stone_bed_capacity(s.d90),
    about=f"{_GRAINS_OF}; riprap and gravel, for capacity and water level",
)
WALL = Method(
    key="keulegan-1938",
    formula=lambda s: numbers(n_from_roughness_height(s.radius, s.roughness_height)),
    needs=("radius", "roughness_height"),
    limits=(grains_deep("roughness_height", 4.0),),
    includes="grain",
    about="the resistance that the roughness height describes; a = 12.2",
    source="Keulegan 1938",
    provenance="memory",
)
LIMERINOS = Method(
    key="limerinos-1970",
    formula=lambda s: gravel.limerinos_d84(s.radius, s.d84),
    needs=("radius", "d84"),
    limits=(
        GRAVEL,
        grains_deep("d84", 0.90, 68.55),
        radius_between(1 * FOOT, 11 * FOOT),
        SUBCRITICAL,
    ),
    includes="grain",
    about=_STREAMS_OF,
    source="Limerinos 1970, USGS WSP 1898-B",
    provenance="seen",
)
LIMERINOS_D50 = replace(
    LIMERINOS,
    key="limerinos-1970-d50",
    formula=lambda s: gravel.limerinos_d50(s.radius, s.d50),
    needs=("radius", "d50"),
    limits=(
        GRAVEL,
        grains_deep("d50", 1.90, 177),
        radius_between(1 * FOOT, 11 * FOOT),
        SUBCRITICAL,
    ),
    provenance="seen second hand",
)
BRAY_D50 = Method(
    key="bray-1979-d50",
    formula=lambda s: gravel.bray_d50(s.d50),
    needs=("d50",),
    limits=(GRAVEL, deep_over("d50")),
    includes="grain",
    about=f"{_STREAMS_OF}; at the 2-year flood",
    source="Bray 1979",
    provenance="seen second hand",
)
BRAY_D65 = replace(
    BRAY_D50,
    key="bray-1979-d65",
    formula=lambda s: gravel.bray_d65(s.d65),
    needs=("d65",),
    limits=(GRAVEL, deep_over("d65")),
    provenance="memory",
)
BRAY_D90 = replace(
    BRAY_D50,
    key="bray-1979-d90",
    formula=lambda s: gravel.bray_d90(s.d90),
    needs=("d90",),
    limits=(GRAVEL, deep_over("d90")),
)
BRAY_LOG = replace(
    BRAY_D50,
    key="bray-1979-log",
    formula=lambda s: gravel.bray_log(s.radius, s.mean_depth, s.d50),
    needs=("radius", "d50"),
    provenance="memory",
)
HEY = Method(
    key="hey-1979",
    formula=lambda s: gravel.hey(s.radius, s.d84, _hey_shape(s)),
    needs=("radius", "d84"),
    limits=(
        GRAVEL,
        deep_over("d84"),
        Limit(
            of="the hydraulic radius over the largest depth",
            value=lambda s, _: numbers(s.radius) / numbers(s.max_depth),
            low=0.541,
            high=1.0,
            silent=True,
        ),
    ),
    includes="grain",
    about=f"{_STREAMS_OF}; a = 11.1 where the largest depth is not known",
    source="Hey 1979",
    provenance="seen second hand",
)
GRIFFITHS = Method(
    key="griffiths-1981",
    formula=lambda s: gravel.griffiths(s.radius, s.d50),
    needs=("radius", "d50"),
    limits=(GRAVEL, grains_deep("d50", 1, 200)),
    includes="grain",
    about=f"{_STREAMS_OF}; beds that do not move",
    source="Griffiths 1981",
    provenance="seen second hand",
)
_SHALLOW: Final = Limit(
    of="the mean depth over d84",
    value=lambda s, _: s.mean_depth / numbers(s.d84),
    high=10,
)
BATHURST = Method(
    key="bathurst-1985",
    formula=lambda s: gravel.bathurst(s.radius, s.mean_depth, s.d84),
    needs=("radius", "d84"),
    limits=(GRAVEL, slope_between(0.004, 0.04), _SHALLOW),
    includes="grain",
    about="made from steep reaches of gravel and boulders; error up to 25 to 35 %",
    error_percent=35,
    source="Bathurst 1985",
    provenance="seen second hand",
)
GRAVEL_POWER = Method(
    key="hds-6-3.20",
    formula=lambda s: gravel.gravel_power(s.radius, s.d84),
    needs=("radius", "d84"),
    limits=(GRAVEL, deep_over("d84")),
    includes="grain",
    about="gravel beds; whose formula it is could not be seen",
    source="FHWA HDS-6, eq. 3.20",
    provenance="seen",
)
GRAVEL_LOG = replace(
    GRAVEL_POWER,
    key="hds-6-3.21",
    formula=lambda s: gravel.gravel_log(s.radius, s.d84),
    source="FHWA HDS-6, eq. 3.21",
)
FERGUSON = Method(
    key="ferguson-2007",
    formula=lambda s: gravel.ferguson(s.radius, s.d84),
    needs=("radius", "d84"),
    limits=(GRAVEL, grains_deep("d84", 0.1, 30)),
    includes="grain",
    about="made from gravel and boulder reaches, shallow flow too; constants 6.5 and 2.5; "
    "single values may be off by a factor of 2",
    source="Ferguson 2007",
    provenance="seen second hand",
)
