"""Area, wetted perimeter and width of sections of a plain shape, from the depth.

All take floats and arrays alike, lengths in any one unit, depth in the deepest point.
"""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.geometry import Water

Floats = NDArray[np.float64]


def _array(values: ArrayLike) -> Floats:
    return np.asarray(values, dtype=np.float64)


def _water(area: Floats, perimeter: Floats, width: Floats) -> Water:
    numbers = np.broadcast_arrays(area, perimeter, width)
    return Water(*(float(v) if v.ndim == 0 else np.asarray(v) for v in numbers))


def trapezoid(depth: ArrayLike, bottom_width: ArrayLike, side_slope: ArrayLike) -> Water:
    """Return the water in a trapezoid.

    A = (b + z y) y, P = b + 2 y sqrt(1 + z^2), T = b + 2 z y (geometry).

    Parameters
    ----------
    depth : float or array
        y, 0 or more.
    bottom_width : float or array
        b; 0 makes a triangle.
    side_slope : float or array
        z, horizontal for 1 vertical; 0 makes a rectangle.

    >>> trapezoid(1.5, 6.0, 2.0)
    Water(area=13.5, perimeter=12.70820393249937, width=12.0)
    """
    y, b, z = _array(depth), _array(bottom_width), _array(side_slope)
    dry = y <= 0
    return _water(
        np.where(dry, 0.0, (b + z * y) * y),
        np.where(dry, 0.0, b + 2 * y * np.sqrt(1 + z * z)),
        np.where(dry, 0.0, b + 2 * z * y),
    )


def rectangle(depth: ArrayLike, width: ArrayLike) -> Water:
    """Return the water in a rectangle: A = b y, P = b + 2 y, T = b (geometry)."""
    return trapezoid(depth, width, 0.0)


def circle(depth: ArrayLike, diameter: ArrayLike) -> Water:
    """Return the water in a pipe that lies partly full.

    With theta = 2 arccos(1 - 2 y/D), the angle at the centre over the water: A = D^2 (theta -
    sin theta)/8, P = D theta/2, T = D sin(theta/2) (geometry). A full pipe has no surface: T is
    0. Conveyance is greatest at 0.938 D, so that near full flow two depths carry the same.

    >>> round(circle(0.5, 1.0).area, 6), circle(1.0, 1.0).width
    (0.392699, 0.0)
    """
    y, d = _array(depth), _array(diameter)
    filled = np.clip(y / d, 0.0, 1.0)
    theta = 2 * np.arccos(1 - 2 * filled)
    width = 2 * d * np.sqrt(filled * (1 - filled))
    return _water(d * d * (theta - np.sin(theta)) / 8, d * theta / 2, width)


def compound(
    depth: ArrayLike,
    bottom_width: ArrayLike,
    side_slope: ArrayLike,
    bank_depth: ArrayLike,
    plain_widths: tuple[ArrayLike, ArrayLike],
    plain_slope: ArrayLike,
) -> Water:
    """Return the water in a trapezoidal channel between two level flood plains, part by part.

    The parts are divided by vertical lines over the edges of the banks, which are not wetted.

    Parameters
    ----------
    depth : float or array of shape (...)
        Depth over the channel's bed.
    bottom_width, side_slope, bank_depth : float or array
        The main channel up to its banks.
    plain_widths : pair of float or array
        Width of the left and of the right flood plain, from bank to foot of the outer slope.
    plain_slope : float or array
        Outer slope of the plains, horizontal for 1 vertical.

    Returns
    -------
    Water
        Arrays of shape (..., 3): left plain, main channel, right plain.

    >>> compound(3.0, 10.0, 0.0, 2.0, (20.0, 20.0), 0.0).perimeter.tolist()
    [21.0, 14.0, 21.0]
    """
    y, bank = _array(depth), _array(bank_depth)
    over = np.maximum(y - bank, 0.0)
    below = trapezoid(np.minimum(y, bank), bottom_width, side_slope)
    channel = _water(_array(below.area) + over * below.width, below.perimeter, below.width)
    left, right = (_plain_water(over, _array(width), _array(plain_slope)) for width in plain_widths)
    parts = (left, channel, right)
    columns = (
        np.broadcast_arrays(*(_array(getattr(part, name)) for part in parts))
        for name in ("area", "perimeter", "width")
    )
    return Water(*(np.stack(column, axis=-1) for column in columns))


def _plain_water(depth: Floats, width: Floats, slope: Floats) -> Water:
    wet = depth > 0
    return _water(
        (width + slope * depth / 2) * depth,
        np.where(wet, width + depth * np.sqrt(1 + slope * slope), 0.0),
        np.where(wet, width + slope * depth, 0.0),
    )
