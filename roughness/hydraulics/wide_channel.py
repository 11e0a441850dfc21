"""What a change of n does to the depth of a wide channel."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike


def stage_change_wide(depth_m: ArrayLike, n: ArrayLike, n_new: ArrayLike) -> Any:
    """Return the change of depth when n becomes ``n_new`` at the same discharge and slope.

    In a wide channel the hydraulic radius is the depth and Manning's equation per metre of
    width reads q = depth^(5/3) sqrt(slope) / n, so depth grows as n^(3/5) (derived). The
    banks are left out: in a narrow section the change is smaller.

    Parameters
    ----------
    depth_m : float or array
        Depth at ``n``, m.
    n, n_new : float or array
        Manning's n before and after, s/m^(1/3), above 0.

    Returns
    -------
    float or array
        New depth minus old, m.

    >>> round(stage_change_wide(1.0, 0.030, 0.036), 4)
    0.1156
    """
    ratio = np.asarray(n_new, dtype=np.float64) / np.asarray(n, dtype=np.float64)
    change = np.asarray(depth_m, dtype=np.float64) * (ratio**0.6 - 1.0)
    return float(change) if change.ndim == 0 else change
