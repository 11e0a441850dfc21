"""The additive-factor method with its spread: values in, values out, no judgement.

The method is Cowan's (1956), n = (n0 + n1 + n2 + n3 + n4) m. Where arrays are taken, the six
factors stand on the last axis in the order of ``roughness.survey.words.FACTORS``.
"""

from roughness.additive.combining import combine, envelope
from roughness.additive.moments import shares_of_variance
from roughness.additive.people import People, people
from roughness.additive.segments import (
    envelope_of_segments,
    shares_of_segments,
    spread_of_segments,
)
from roughness.additive.spreads import Spread, quantiles, spread

__all__ = [
    "People",
    "Spread",
    "combine",
    "envelope",
    "envelope_of_segments",
    "people",
    "quantiles",
    "shares_of_segments",
    "shares_of_variance",
    "spread",
    "spread_of_segments",
]
