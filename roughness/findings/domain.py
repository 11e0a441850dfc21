"""Rules about where the additive method was tested and where it was not."""

from typing import Final

import numpy as np

from roughness.findings.facts import Facts, Flags, Numbers
from roughness.findings.rule import COMMON_PRACTICE, Case, rule
from roughness.findings.wording import ratio
from roughness.quantities.printing import show_n, show_value

LARGEST_RADIUS_M: Final = 4.6  # 15 ft
LITTLE_TESTED_SLOPE: Final = 0.002
STEEP_SLOPE: Final = 0.01
FEW_GRAINS: Final = 4.0
GRAINS_IN_THE_FLOW: Final = 1.2
G: Final = 9.80665  # m/s2, standard
NOT_NATURAL: Final = ("concrete", "concrete-smooth", "rock-cut")

LARGE_ROUGHNESS: Final = "Bathurst, Li & Simons 1981, memory"


def _radius(facts: Facts) -> Numbers:
    """Return the hydraulic radius, else the mean depth, which is never less, m."""
    radius = facts.hydraulic_radius_m
    return np.where(np.isnan(radius), facts.depth_m, radius)


def _grains_deep(facts: Facts, row: int) -> str:
    deep = ratio(_radius(facts)[row] * 1000, facts.d84_mm[row])
    named = "Mean depth" if np.isnan(facts.hydraulic_radius_m[row]) else "Hydraulic radius"
    return f"{named} is {deep} times the d84 of {show_value(facts.d84_mm[row])} mm"


def _submerged_less_than(facts: Facts, grains: float) -> Flags:
    less: Flags = _radius(facts) * 1000 < grains * facts.d84_mm
    return less


def _natural_channel(facts: Facts) -> Flags:
    """Steep streams were measured; concrete and flood plains have no such drops and pools."""
    return facts.in_channel & ~facts.lined & facts.whole_part


def _tables_alone(facts: Facts) -> Flags:
    base = facts.factors["base"]
    return ~np.isnan(base.best) & ~(base.own_best & base.noted)


@rule(
    "hydraulic-radius-beyond-method",
    "ask",
    meaning="the hydraulic radius is above 4.6 m (15 ft), larger than the method was made for",
    source="Chow 1959, p. 109, memory",
)
def hydraulic_radius_beyond_method(facts: Facts) -> Case:
    """Ask, since the streams behind the tables were small and moderate."""
    return Case(
        (facts.hydraulic_radius_m > LARGEST_RADIUS_M) & facts.whole_part,
        lambda row: (
            f"Hydraulic radius {show_value(facts.hydraulic_radius_m[row])} m is above 4.6 m, "
            "where the method is doubtful; compare with n from measured flow."
        ),
    )


@rule(
    "slope-little-tested",
    "tell",
    meaning="the slope is 0.002 or more: the tables were little tested there",
    source="Jarrett 1984, memory: steep streams begin at 0.002",
)
def slope_little_tested(facts: Facts) -> Case:
    """Tell, up to where the slope is steep enough to ask."""
    steep = (facts.slope >= LITTLE_TESTED_SLOPE) & (facts.slope < STEEP_SLOPE)
    return Case(
        steep & _natural_channel(facts),
        lambda row: (
            f"On a slope of {show_value(facts.slope[row])} the tables are little tested, and n "
            "tends to be higher; compare with measured steep streams."
        ),
    )


@rule(
    "slope-steep",
    "ask",
    meaning="the slope is 0.01 or more: compare with measured steep streams",
    source=COMMON_PRACTICE,
)
def slope_steep(facts: Facts) -> Case:
    """Ask, since drops and pools, not surfaces, hold such flow back."""
    return Case(
        (facts.slope >= STEEP_SLOPE) & _natural_channel(facts),
        lambda row: (
            f"The slope {show_value(facts.slope[row])} is steep and the tables are hardly tested "
            "there; say in a note which measured steep streams this n was compared with."
        ),
    )


@rule(
    "grains-stand-in-the-flow",
    "stop",
    meaning="the flow is under 1.2 times the d84 deep and n rests on tables alone",
    source=LARGE_ROUGHNESS,
    about="base",
)
def grains_stand_in_the_flow(facts: Facts) -> Case:
    """Stop: a base value for a covered bed says nothing about stones that stand out."""
    return Case(
        _submerged_less_than(facts, GRAINS_IN_THE_FLOW) & _tables_alone(facts),
        lambda row: (
            f"{_grains_deep(facts, row)}, so the stones stand in the flow and no table value "
            "holds; give a base value for such flow, with a note on where it comes from."
        ),
    )


@rule(
    "few-grains-deep",
    "ask",
    meaning="the flow is under four times the d84 deep: n changes strongly with depth",
    source=LARGE_ROUGHNESS,
    about="base",
)
def few_grains_deep(facts: Facts) -> Case:
    """Silent where the flow is so shallow that the rule above stops."""
    stopped = _submerged_less_than(facts, GRAINS_IN_THE_FLOW) & _tables_alone(facts)
    return Case(
        _submerged_less_than(facts, FEW_GRAINS) & facts.whole_part & ~stopped,
        lambda row: (
            f"{_grains_deep(facts, row)}, less than four, where n rises as the flow gets "
            "shallower; say in a note for which depth this n holds."
        ),
    )


@rule(
    "supercritical-reach",
    "ask",
    meaning="the Froude number with this n is above 1 over a natural reach",
    source="Jarrett 1984, memory: long natural reaches stay below critical flow",
)
def supercritical_reach(facts: Facts) -> Case:
    """V = R^(2/3) S^(1/2) / n and Fr = V / sqrt(g depth), squared to divide by nothing."""
    grade = facts.factors["base"].grade
    natural = facts.whole_part & (facts.n_best > 0)
    for lining in NOT_NATURAL:
        natural = natural & (grade != lining)
    drive = np.cbrt(facts.hydraulic_radius_m) ** 4 * facts.slope
    brake = facts.n_best**2 * G * facts.depth_m

    def says(row: int) -> str:
        froude = ratio(np.sqrt(drive[row]), np.sqrt(brake[row]))
        return (
            f"With n {show_n(facts.n_best[row])} the flow would have a Froude number of "
            f"{froude}; natural reaches seldom stay above 1, so n may be too low, or "
            "slope or depth wrong."
        )

    return Case(natural & (brake > 0) & (drive > brake), says)


RULES = (
    hydraulic_radius_beyond_method,
    slope_little_tested,
    slope_steep,
    grains_stand_in_the_flow,
    few_grains_deep,
    supercritical_reach,
)
