"""The additive-factor method with its spread: values in, values out, no judgement.

The method is Cowan's (1956), n = (n0 + n1 + n2 + n3 + n4) m. Where arrays are taken, the six
factors stand on the last axis in the order of ``roughness.survey.words.FACTORS``.
"""

from roughness.additive.combining import combine, envelope
from roughness.additive.moments import shares_of_variance
from roughness.additive.people import SOURCE as SOURCE_OF_PEOPLE
from roughness.additive.people import Z95, People, people, sd_of_people, sigma_of_people
from roughness.additive.segments import (
    envelope_of_segments,
    shares_of_segments,
    spread_of_segments,
)
from roughness.additive.spreads import Spread, quantiles, spread

__all__ = [
    "SOURCE_OF_PEOPLE",
    "Z95",
    "People",
    "Spread",
    "combine",
    "envelope",
    "envelope_of_segments",
    "people",
    "quantiles",
    "sd_of_people",
    "shares_of_segments",
    "shares_of_variance",
    "sigma_of_people",
    "spread",
    "spread_of_segments",
]
