"""Independent estimates of n where plants rule: counted stems, and grass by its class."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from roughness.comparison.method import Domain
from roughness.comparison.other_roads import OtherN
from roughness.hydraulics.grass import CURVE_INDEX, Retardance, n_of_grass, n_of_grass_at_slope
from roughness.hydraulics.vegetation import n_with_stems, vegetation_density
from roughness.quantities.printing import show_value


@dataclass(frozen=True, kw_only=True)
class Stems:
    """Stems counted in a sample area; numbers, diameters and heights by class."""

    numbers: Sequence[int]
    diameters_m: Sequence[float]
    heights_m: Sequence[float | None]
    area_m2: float
    n_boundary: float
    drag: float


def of_stems(stems: Stems, depth_m: float) -> OtherN:
    """Return n of a part with counted stems at a depth, by vegetation density.

    The depth stands for the hydraulic radius, as on flood plains. Stems that end below the
    water are outside: the drag then is another.
    """
    heights = [depth_m if height is None else height for height in stems.heights_m]
    density = vegetation_density(stems.numbers, stems.diameters_m, stems.area_m2, heights, depth_m)
    under_water = any(height < depth_m for height in heights)
    return OtherN(
        method="vegetation-density",
        n=float(n_with_stems(stems.n_boundary, density, stems.drag, depth_m)),
        domain="outside" if under_water else "inside",
        why="some stems end below the water"
        if under_water
        else "all stems reach the water surface",
        includes="whole reach",
        about=f"stems of density {show_value(float(f'{density:.3g}'))} /m on a boundary of the n "
        "that was given; it replaces the vegetation grade and is never added to one",
        source="Petryk & Bosmajian 1975; USGS WSP 2339, eq. 7",
        provenance="seen second hand",
    )


def of_grass(
    retardance: Retardance, radius_m: float, slope: float, velocity_ms: float
) -> tuple[OtherN, ...]:
    """Return n of a grass lining by two relations, as far as their measurements are known.

    NaN is unknown: Kouwen's needs hydraulic radius and slope, Temple's radius and velocity.
    """
    found = []
    if not np.isnan(radius_m * slope):
        found.append(
            _grass(
                "kouwen-hec-15",
                float(n_of_grass_at_slope(retardance, radius_m, slope)),
                "inside",
                "radius and slope are known; limits of it are not",
                "Kouwen's relation, FHWA HEC-15",
            )
        )
    if not np.isnan(radius_m * velocity_ms):
        n = float(n_of_grass(CURVE_INDEX[retardance], radius_m * velocity_ms))
        beyond = np.isnan(n)
        found.append(
            _grass(
                "temple-1987",
                n,
                "outside" if beyond else "inside",
                "velocity times radius is not within 36 ft2/s (3.34 m2/s)"
                if beyond
                else "velocity times radius is within 36 ft2/s (3.34 m2/s)",
                "Temple and others 1987, USDA Agriculture Handbook 667",
            )
        )
    return tuple(found)


def _grass(method: str, n: float, domain: Domain, why: str, source: str) -> OtherN:
    return OtherN(
        method=method,
        n=None if np.isnan(n) else n,
        domain="outside" if np.isnan(n) else domain,
        why=f"it gives no value here; {why}" if np.isnan(n) else why,
        includes="whole reach",
        about="soil and grass of a lined channel of one retardance class",
        source=source,
        provenance="memory",
    )
