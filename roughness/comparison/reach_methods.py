"""Roads to the n of sand beds, whose forms decide, and to the n of whole reaches."""

from dataclasses import replace
from typing import Final

import numpy as np

from roughness.comparison import gravel, sand, slope
from roughness.comparison.constants import FOOT, G, Numbers, numbers
from roughness.comparison.limits import GRAVEL, MM, SAND, radius_between, slope_between
from roughness.comparison.method import Limit, Method
from roughness.comparison.streams import Streams

_WHOLE: Final = "the whole resistance of the reach"


def _regime(streams: Streams, n: Numbers) -> Numbers:
    velocity = streams.velocity_with(n)
    return sand.regime_number(velocity, numbers(streams.d50), numbers(streams.slope))


def _regime_where_slope_leaves_two(streams: Streams, n: Numbers) -> Numbers:
    return np.where(numbers(streams.slope) > sand.STEEP, np.nan, _regime(streams, n))


_SORTED: Final = Limit(of="the gradation", value=lambda s, _: s.sorting, low=1, high=5)
_LOWER_REGIME: Final = Limit(
    of="the grain Froude number over its limiting value",
    value=_regime,
    high=sand.LOWER_ENDS,
    near_high=sand.UPPER_BEGINS,
)
_UPPER_REGIME: Final = replace(
    _LOWER_REGIME,
    value=_regime_where_slope_leaves_two,
    low=sand.UPPER_BEGINS,
    high=np.inf,
    near_low=sand.LOWER_ENDS,
    near_high=np.inf,
    silent=True,
)


def _froude_of_small_flow(streams: Streams, n: Numbers) -> Numbers:
    """Return the Froude number where the discharge is below 3 m3/s, else NaN."""
    velocity = streams.velocity_with(n)
    froude = velocity / np.sqrt(G * streams.mean_depth)
    return np.where(velocity * numbers(streams.area) < 3.0, froude, np.nan)


BROWNLIE_LOWER = Method(
    key="brownlie-1983-lower",
    formula=lambda s: sand.brownlie_lower(s.radius, s.d50, s.slope, s.sorting),
    needs=("radius", "d50", "slope", "sorting"),
    limits=(SAND, _SORTED, slope_between(0, sand.STEEP, near_high=sand.STEEP), _LOWER_REGIME),
    includes="grain",
    about="grains and bed forms of a sand bed in the lower regime: ripples and dunes",
    source="Brownlie 1983",
    provenance="memory",
)
BROWNLIE_UPPER = replace(
    BROWNLIE_LOWER,
    key="brownlie-1983-upper",
    formula=lambda s: sand.brownlie_upper(s.radius, s.d50, s.slope, s.sorting),
    limits=(SAND, _SORTED, _UPPER_REGIME),
    about="grains and bed forms of a sand bed in the upper regime: flat bed and antidunes",
)
RICKENMANN_RECKING = Method(
    key="rickenmann-recking-2011",
    formula=lambda s: gravel.rickenmann_recking(s.mean_depth, s.d84),
    needs=("radius", "d84"),
    limits=(GRAVEL,),
    includes="whole reach",
    about="the whole resistance of 2,890 field values, in a wide channel",
    source="Rickenmann & Recking 2011",
    provenance="memory",
)

JARRETT = Method(
    key="jarrett-1984",
    formula=lambda s: slope.jarrett(s.radius, s.slope),
    needs=("radius", "slope"),
    limits=(slope_between(0.002, 0.04, near_high=0.052), radius_between(0.5 * FOOT, 7 * FOOT)),
    includes="whole reach",
    about=f"{_WHOLE}: stable natural channels without backwater",
    error_percent=28,
    source="Jarrett 1984",
    provenance="seen second hand",
)
SAUER = Method(
    key="sauer-1990",
    formula=lambda s: slope.sauer(s.radius, s.slope),
    needs=("radius", "slope"),
    limits=(slope_between(0.0003, 0.018), radius_between(0.0, 19 * FOOT)),
    includes="whole reach",
    about=f"{_WHOLE}: natural channels at high flow, slope of the water surface",
    source="Sauer 1990, as cited in USGS WSP 2441",
    provenance="memory",
)
BRAY_SLOPE = Method(
    key="bray-1979-slope",
    formula=lambda s: slope.bray_slope(s.slope),
    needs=("slope",),
    limits=(GRAVEL,),
    includes="whole reach",
    about=f"{_WHOLE}: gravel reaches at the 2-year flood",
    source="Bray 1979",
    provenance="memory",
)
DINGMAN_SHARMA = Method(
    key="dingman-sharma-1997",
    formula=lambda s: slope.dingman_sharma(s.area, s.radius, s.slope),
    needs=("area", "radius", "slope"),
    limits=(
        Limit(
            of="the Froude number of a flow below 3 m3/s",
            value=_froude_of_small_flow,
            low=0.2,
            near_low=0.2,
            silent=True,
        ),
    ),
    includes="whole reach",
    about=f"{_WHOLE}: flow within the banks of fairly straight channels",
    source="Dingman & Sharma 1997",
    provenance="seen",
)
LACEY = Method(
    key="lacey",
    formula=lambda s: slope.lacey(s.slope),
    needs=("slope",),
    limits=(
        Limit(
            of="the grain size",
            value=lambda s, _: s.grain_size,
            high=sand.SAND_M[1],
            near_high=sand.SAND_M[1],
            unit=" mm",
            shown_in=MM,
        ),
    ),
    includes="whole reach",
    about=f"{_WHOLE}: canals in silt",
    source="Lacey, regime of silt canals",
    provenance="memory",
    unchecked="it holds for canals in silt that are in regime alone, which nothing measured tells",
)
