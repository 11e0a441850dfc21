"""The two unit systems of hydraulics, joined exactly so that n is the same number in both."""

from dataclasses import dataclass
from typing import Final

FOOT_M: Final = 0.3048
"""Length of a foot in m, exact (international yard and pound agreement, 1959)."""
STANDARD_GRAVITY: Final = 9.80665
"""m/s2, exact by convention (3rd CGPM, 1901)."""


@dataclass(frozen=True, slots=True)
class UnitSystem:
    """What a formula needs to know of the units its lengths are in."""

    metre: float
    """Length of a metre in this system: 1, or 1/0.3048 feet."""

    @property
    def ku(self) -> float:
        """Factor of Manning's equation: 1 in metres, (1/0.3048)^(1/3) = 1.48592 in feet."""
        return float(self.metre ** (1 / 3))

    @property
    def gravity(self) -> float:
        """Standard gravity: 9.80665 m/s2, or 32.1740 ft/s2."""
        return STANDARD_GRAVITY * self.metre


METRIC: Final = UnitSystem(1.0)
US: Final = UnitSystem(1 / FOOT_M)
