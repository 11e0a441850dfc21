"""Hydraulics: water in sections, uniform flow, composite n, vegetation, n from measured flow.

One subject a file, pure numpy, floats and arrays alike; segments and parts on the last axis.
What the additive method leans on is named here.
"""

from roughness.hydraulics.composite import horton_einstein, pavlovskii, perimeter_mean
from roughness.hydraulics.wide_channel import stage_change_wide

__all__ = ["horton_einstein", "pavlovskii", "perimeter_mean", "stage_change_wide"]
