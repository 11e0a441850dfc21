"""Hydraulics that the additive method leans on: composite n, and depth against n.

They take floats and arrays alike, with the segments of a part on the last axis.
"""

from roughness.hydraulics.composite import horton_einstein, pavlovskii, perimeter_mean
from roughness.hydraulics.wide_channel import stage_change_wide

__all__ = ["horton_einstein", "pavlovskii", "perimeter_mean", "stage_change_wide"]
