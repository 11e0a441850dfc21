"""n from a measured flow, with its errors, its scheme and what is to be said about it."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import isnan, sqrt
from typing import Final

import numpy as np

from roughness.errors import InputError
from roughness.findings import Finding
from roughness.findings.measured_flow import FlowFacts, find_in_flow
from roughness.hydraulics.back_calculation import (
    BackCalculation,
    Numbers,
    Reckoning,
    back_calculate,
    n_of_uniform_flow,
    relative_sd,
    relative_sd_of_uniform_flow,
)
from roughness.hydraulics.unit_systems import STANDARD_GRAVITY
from roughness.quantities.printing import rounded
from roughness.survey.measured_flow import CheckedFlow, MeasurementErrors

RELATION: Final = (
    "energy equation over the sections with Manning friction, the friction slope from the"
    " geometric mean of neighbouring conveyances (form of Barnes 1967, USGS WSP 1849, and"
    " Dalrymple and Benson 1967, USGS TWRI 3-A2; from memory)"
)
UNIFORM: Final = "uniform flow at one section: n = A R^(2/3) S^(1/2) / Q"
HOLDS: Final = (
    "This n holds everything that takes energy in the reach, not the friction of the boundary"
    " alone, and belongs to this scheme: another one gives another n."
)


@dataclass(frozen=True, kw_only=True)
class Scheme:
    """How n was found: it means nothing without that."""

    relation: str
    expansion_loss: float | None
    contraction_loss: float | None
    alpha: tuple[float, ...] | None
    """Velocity head coefficient at each section; null, like both losses, with one section."""
    gravity_ms2: float
    holds: str


@dataclass(frozen=True, kw_only=True)
class Subreach:
    """n between two neighbouring sections."""

    n: float | None
    """Null where the energy line does not fall."""
    sd: float | None
    length_m: float
    fall_m: float
    net_head_m: float
    loss_m: float


@dataclass(frozen=True, kw_only=True)
class FoundN:
    """What ``roughness backcalc`` prints."""

    n: float
    sd: float | None
    """Standard deviation of n from the errors that were given; null where none was."""
    subreaches: tuple[Subreach, ...]
    findings: tuple[Finding, ...]
    discharge_m3s: float
    water_level_m: float | None
    """At the first section, so that n of several events can be laid against it."""
    hydraulic_radius_m: float
    """Mean of the sections."""
    froude: float
    """The largest of the sections, V / sqrt(g A / T); an upper bound where a width lacks."""
    fall_m: float | None
    """Of the water surface; null, like both heads below, with one section."""
    net_head_m: float | None
    """What friction takes: fall and change of velocity head less the losses."""
    loss_m: float | None
    scheme: Scheme


@dataclass(frozen=True, slots=True)
class _Along:
    """What only a reach of two sections or more has."""

    found: BackCalculation
    subreaches: tuple[Subreach, ...]


def n_from_flow(flow: CheckedFlow, where: str = "measured flow") -> FoundN:
    """Return n of a reach from a measured flow.

    Parameters
    ----------
    flow : CheckedFlow
        As ``read_measured_flows`` and ``checked_flow`` return it.
    where : str
        Names the input in messages.

    Raises
    ------
    InputError
        Where the data contradict each other: the energy line does not fall along the reach.
    """
    errors = flow.errors
    if len(flow.sections) == 1:
        n, relative = _uniform(flow)
        return _found(flow, n, relative, None)
    found = back_calculate(
        flow.discharge_m3s,
        [s.distance_m for s in flow.sections],
        [s.area_m2 for s in flow.sections],
        [s.wetted_perimeter_m for s in flow.sections],
        [s.water_level_m or 0.0 for s in flow.sections],
        [s.alpha for s in flow.sections],
        expansion_loss=flow.expansion_loss,
        contraction_loss=flow.contraction_loss,
    )
    if not found.whole.net_head > 0:
        raise _contradiction(found, where)
    relative = float(_relative_sd(found.whole, errors))
    return _found(flow, float(found.whole.n), relative, _Along(found, _subreaches(flow, found)))


def _uniform(flow: CheckedFlow) -> tuple[float, float]:
    (section,), errors = flow.sections, flow.errors
    n = n_of_uniform_flow(
        flow.discharge_m3s, section.area_m2, section.wetted_perimeter_m, flow.slope or 0.0
    )
    relative = relative_sd_of_uniform_flow(
        discharge=(errors.discharge_percent or 0.0) / 100,
        slope=(errors.slope_percent or 0.0) / 100,
        area=(errors.area_percent or 0.0) / 100,
    )
    return float(n), float(relative)


def _relative_sd(reckoning: Reckoning, errors: MeasurementErrors) -> Numbers:
    return relative_sd(
        reckoning,
        discharge=(errors.discharge_percent or 0.0) / 100,
        water_level=errors.water_level_m or 0.0,
        area=(errors.area_percent or 0.0) / 100,
    )


def _contradiction(found: BackCalculation, where: str) -> InputError:
    whole, head = found.whole, found.velocity_head
    return InputError(
        f"the energy line does not fall: fall {rounded(float(whole.fall), 3)} m, change of"
        f" velocity head {rounded(float(head[0] - head[-1]), 3)} m, losses"
        f" {rounded(float(whole.loss), 3)} m leave {rounded(float(whole.net_head), 3)} m"
        " to friction",
        where=f"{where}: sections",
        wanted="they run from upstream to downstream; check water levels, areas and discharge",
    )


def _subreaches(flow: CheckedFlow, found: BackCalculation) -> tuple[Subreach, ...]:
    part = found.subreaches
    sds = part.n * _relative_sd(part, flow.errors)
    lengths = np.abs(np.diff([s.distance_m for s in flow.sections]))
    return tuple(
        Subreach(
            n=_known(float(part.n[i])),
            sd=_known(float(sds[i])) if _given(flow) else None,
            length_m=float(lengths[i]),
            fall_m=float(part.fall[i]),
            net_head_m=float(part.net_head[i]),
            loss_m=float(part.loss[i]),
        )
        for i in range(len(lengths))
    )


def _found(flow: CheckedFlow, n: float, relative: float, along: _Along | None) -> FoundN:
    facts = _facts(flow, n, along)
    return FoundN(
        n=n,
        sd=n * relative if _given(flow) else None,
        subreaches=along.subreaches if along else (),
        findings=find_in_flow(facts),
        discharge_m3s=flow.discharge_m3s,
        water_level_m=flow.sections[0].water_level_m,
        hydraulic_radius_m=_mean([s.area_m2 / s.wetted_perimeter_m for s in flow.sections]),
        froude=facts.froude,
        fall_m=facts.fall_m,
        net_head_m=facts.net_head_m,
        loss_m=facts.loss_m,
        scheme=Scheme(
            relation=RELATION if along else UNIFORM,
            expansion_loss=flow.expansion_loss if along else None,
            contraction_loss=flow.contraction_loss if along else None,
            alpha=tuple(s.alpha for s in flow.sections) if along else None,
            gravity_ms2=STANDARD_GRAVITY,
            holds=HOLDS,
        ),
    )


def _facts(flow: CheckedFlow, n: float, along: _Along | None) -> FlowFacts:
    # The hydraulic radius is less than the mean depth, so that it gives an upper bound of the
    # Froude number and a reach that is too short for it is too short for the depth.
    depths = [s.area_m2 / (s.top_width_m or s.wetted_perimeter_m) for s in flow.sections]
    whole = along.found.whole if along else None
    return FlowFacts(
        n=n,
        sections=len(flow.sections),
        length_m=sum(s.length_m for s in along.subreaches) if along else None,
        fall_m=float(whole.fall) if whole else None,
        net_head_m=float(whole.net_head) if whole else None,
        loss_m=float(whole.loss) if whole else None,
        velocity_heads_m=along.found.velocity_head.tolist() if along else (),
        depth_m=_mean(depths),
        froude=max(
            flow.discharge_m3s / s.area_m2 / sqrt(STANDARD_GRAVITY * depth)
            for s, depth in zip(flow.sections, depths, strict=True)
        ),
        widths_known=all(s.top_width_m is not None for s in flow.sections),
        subreach_n=[s.n for s in along.subreaches] if along else (),
        errors_left_out=[word for word, value in _errors(flow) if value is None],
        errors_given=_given(flow),
    )


def _errors(flow: CheckedFlow) -> list[tuple[str, float | None]]:
    errors, alone = flow.errors, len(flow.sections) == 1
    of_fall = ("slope", errors.slope_percent) if alone else ("water level", errors.water_level_m)
    return [("discharge", errors.discharge_percent), of_fall, ("area", errors.area_percent)]


def _given(flow: CheckedFlow) -> bool:
    return any(value is not None for _, value in _errors(flow))


def _known(value: float) -> float | None:
    return None if isnan(value) else value


def _mean(values: Sequence[float]) -> float:
    return sum(values) / len(values)
