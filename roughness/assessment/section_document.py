"""What ``roughness section`` prints, as dataclasses. Lengths in m, times in s."""

from collections.abc import Mapping
from dataclasses import asdict, dataclass
from typing import Any, ClassVar

from roughness.findings import Finding
from roughness.survey.words import Setting


@dataclass(frozen=True, kw_only=True)
class Flow:
    """The whole section at one n of its parts."""

    water_level_m: float
    depth_m: float
    """Over the deepest point."""
    area_m2: float
    wetted_perimeter_m: float
    hydraulic_radius_m: float
    mean_depth_m: float
    """Area over width at the surface."""
    top_width_m: float
    discharge_m3s: float
    velocity_ms: float
    froude: float
    """V / sqrt(g A/T), g = 9.80665 m/s2, velocity head coefficient taken as 1."""
    reynolds: float
    """V R / nu with the hydraulic radius, nu = 1.1386e-6 m2/s (water at 15 degrees C)."""
    conveyance_m3s: float
    """Sum over the parts."""
    alpha: float
    """Velocity head coefficient from the parts' velocities; 1 in a section of one part."""
    beta: float
    """Momentum coefficient from the parts' velocities."""
    critical_depth_m: float | None
    """Where the Froude number is 1; None where it lies above what was surveyed."""
    equivalent_n: float
    """n of the whole for its conveyance: for display alone."""


@dataclass(frozen=True, kw_only=True)
class PartFlow:
    """One part at the same water level; all 0 and n None where it is dry."""

    n: float | None
    """Its own, or by equal velocity (Horton/Einstein) from its segments."""
    area_m2: float
    wetted_perimeter_m: float
    """Without the lines between water and water."""
    hydraulic_radius_m: float
    mean_depth_m: float
    top_width_m: float
    conveyance_m3s: float
    discharge_m3s: float
    velocity_ms: float


@dataclass(frozen=True, kw_only=True)
class PartOfSection:
    """One part of the section."""

    __pydantic_config__: ClassVar[dict[str, Any]] = {
        "alias_generator": lambda name: name.removesuffix("_")
    }

    name: str
    setting: Setting
    from_: float | None
    """Distance from the left end; None at the end of the section."""
    to: float | None
    low: PartFlow | None = None
    best: PartFlow
    high: PartFlow | None = None
    composite_n: Mapping[str, float] | None
    """The best n by each relation at the level of the best n; None where it is dry."""


@dataclass(frozen=True, kw_only=True)
class SectionFlow:
    """Depth, velocity and composite n of a section; low and high where an n has a range."""

    low: Flow | None = None
    best: Flow
    high: Flow | None = None
    composite_n: Mapping[str, float] | None = None
    """That of the part, where there is one part only: parts add conveyances instead."""
    parts: tuple[PartOfSection, ...]
    findings: tuple[Finding, ...]

    @property
    def stands_stopped(self) -> bool:
        """Whether a finding says not to use it as it is."""
        return any(finding.level == "stop" for finding in self.findings)

    def as_document(self) -> dict[str, Any]:
        """Return what ``roughness section`` prints, ready for JSON."""
        document = asdict(self)
        parts = [
            {key.removesuffix("_"): value for key, value in part.items()}
            for part in document["parts"]
        ]
        if len(parts) > 1:
            del document["composite_n"]
        return _without_absent(document | {"parts": [_without_absent(part) for part in parts]})


def _without_absent(entry: dict[str, Any]) -> dict[str, Any]:
    """Return it without low and high where there are none."""
    return {key: v for key, v in entry.items() if v is not None or key not in ("low", "high")}
