"""Rules about n that was found from a measured flow: whether reach and n are fit for it."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Final

from roughness.findings.rule import COMMON_PRACTICE, LEVELS, Finding, Level, RuleInWords
from roughness.findings.wording import ratio
from roughness.quantities.printing import enumerate_words, rounded, show_n, show_share

LEAST_FALL_M: Final = 0.15  # 0.5 ft
LEAST_LENGTH_IN_DEPTHS: Final = 75
ENOUGH_SECTIONS: Final = 3
MOST_LOST: Final = 0.2
MOST_UNEVEN: Final = 1.5
USUAL_N: Final = (0.010, 0.30)

REACH_RULES: Final = "Dalrymple and Benson 1967 (USGS TWRI 3-A2), from memory"


@dataclass(frozen=True, kw_only=True)
class FlowFacts:
    """What the rules look at; numbers that are not known are None."""

    n: float
    sections: int
    length_m: float | None = None
    fall_m: float | None = None
    net_head_m: float | None = None
    loss_m: float | None = None
    velocity_heads_m: Sequence[float] = ()
    depth_m: float
    """Mean depth of the sections; their hydraulic radius, which is less, where widths lack."""
    froude: float
    """The largest of the sections; an upper bound where widths lack."""
    widths_known: bool
    subreach_n: Sequence[float | None] = ()
    """None where the energy line does not fall."""
    errors_left_out: Sequence[str] = ()
    errors_given: bool = True


Check = Callable[[FlowFacts], str]


@dataclass(frozen=True, kw_only=True)
class FlowRule(RuleInWords):
    """One named check; it returns its sentence, or nothing where it is not met."""

    check: Check


def flow_rule(
    key: str, level: Level, *, meaning: str, source: str = COMMON_PRACTICE
) -> Callable[[Check], FlowRule]:
    """Declare a rule about a measured flow."""
    return lambda check: FlowRule(key=key, level=level, meaning=meaning, source=source, check=check)


def find_in_flow(facts: FlowFacts) -> tuple[Finding, ...]:
    """Return what the rules say about n from one measured flow, worst first."""
    return tuple(
        Finding(rule.level, rule.key, None, says)
        for rule in RULES
        if (says := rule.check(facts)) != ""
    )


@flow_rule(
    "measured-fall-small",
    "ask",
    meaning="fall or net head of the measured reach is under 0.15 m (0.5 ft)",
    source=REACH_RULES,
)
def fall_small(facts: FlowFacts) -> str:
    """Ask where reading errors are large beside the fall."""
    if facts.fall_m is None or facts.net_head_m is None:
        return ""
    name, least = min(
        ("water surface falls", facts.fall_m), ("energy line falls", facts.net_head_m),
        key=lambda one: one[1],
    )  # fmt: skip
    if least >= LEAST_FALL_M:
        return ""
    return (
        f"The {name} by {rounded(least, 3)} m only; below {LEAST_FALL_M} m the errors of the levels"
        " weigh too much: take a longer reach."
    )


@flow_rule(
    "measured-fall-under-velocity-head",
    "ask",
    meaning="the fall of the measured reach is less than its largest velocity head",
    source=REACH_RULES,
)
def fall_under_velocity_head(facts: FlowFacts) -> str:
    """Ask where velocity heads and their coefficient decide more than friction."""
    if facts.fall_m is None or not facts.velocity_heads_m:
        return ""
    head = max(facts.velocity_heads_m)
    if facts.fall_m >= head:
        return ""
    return (
        f"The fall of {rounded(facts.fall_m, 3)} m is less than the velocity head of"
        f" {rounded(head, 3)} m, so that alpha and the losses decide much of n: take a longer"
        " reach."
    )


@flow_rule(
    "measured-losses-large",
    "ask",
    meaning="losses by expansion and contraction are above 20 % of what friction takes",
)
def losses_large(facts: FlowFacts) -> str:
    """Ask where n hangs on the loss coefficients."""
    if facts.loss_m is None or facts.net_head_m is None:
        return ""
    share = facts.loss_m / facts.net_head_m
    if share <= MOST_LOST:
        return ""
    return (
        f"The losses by expansion and contraction ({rounded(facts.loss_m, 3)} m) are"
        f" {show_share(share)} of the head that friction takes: n hangs on their coefficients."
    )


@flow_rule(
    "measured-reach-short",
    "ask",
    meaning="the measured reach is shorter than 75 mean depths",
    source=REACH_RULES,
)
def reach_short(facts: FlowFacts) -> str:
    """Ask where the reach is too short for its depth."""
    if facts.length_m is None or facts.length_m >= LEAST_LENGTH_IN_DEPTHS * facts.depth_m:
        return ""
    depth = "mean depth" if facts.widths_known else "hydraulic radius (widths are not given)"
    return (
        f"The reach of {rounded(facts.length_m, 0)} m is"
        f" {ratio(facts.length_m, facts.depth_m, 0)} times its {depth} of"
        f" {rounded(facts.depth_m, 2)} m; {LEAST_LENGTH_IN_DEPTHS} times the mean depth is due."
    )


@flow_rule(
    "measured-flow-supercritical",
    "ask",
    meaning="the Froude number at a section of the measured reach is above 1",
)
def supercritical(facts: FlowFacts) -> str:
    """Ask where the flow is, or may be, supercritical."""
    if not facts.froude > 1:
        return ""
    number = rounded(facts.froude, 2)
    if facts.widths_known:
        return (
            f"The Froude number reaches {number}: above 1 a natural reach seldom stays, and a jump"
            " takes energy that is not friction. Check discharge, area and width."
        )
    return (
        f"The Froude number may be above 1 (up to {number}, by the hydraulic radius): give"
        " top_width_m to settle it."
    )


@flow_rule(
    "measured-energy-rises",
    "ask",
    meaning="the energy line does not fall between two neighbouring sections",
)
def energy_rises(facts: FlowFacts) -> str:
    """Ask where a subreach contradicts itself while the whole reach does not."""
    wrong = [f"{i + 1} and {i + 2}" for i, n in enumerate(facts.subreach_n) if n is None]
    if not wrong:
        return ""
    return (
        f"The energy line does not fall between sections {enumerate_words(wrong)}: check their"
        " levels and areas, or leave a section out."
    )


@flow_rule(
    "measured-n-unusual",
    "ask",
    meaning="n from the measured flow is below 0.010 or above 0.30",
)
def n_unusual(facts: FlowFacts) -> str:
    """Ask where n is one that streams seldom have."""
    if USUAL_N[0] <= facts.n <= USUAL_N[1]:
        return ""
    return (
        f"n of {show_n(facts.n)} is one that streams in flood seldom have: check the units (m3/s,"
        " m2, m) and the levels."
    )


@flow_rule(
    "measured-subreaches-differ",
    "tell",
    meaning="n of the subreaches of the measured reach differs by more than half",
)
def subreaches_differ(facts: FlowFacts) -> str:
    """Tell where one n does not speak for the whole reach."""
    known = [n for n in facts.subreach_n if n is not None]
    if len(known) < 2 or max(known) <= MOST_UNEVEN * min(known):
        return ""
    return (
        f"n of the subreaches lies between {show_n(min(known))} and {show_n(max(known))}: either"
        " the reach is uneven, or levels err by a part of the fall between neighbours."
    )


@flow_rule(
    "measured-sections-few",
    "tell",
    meaning="fewer than three sections were measured",
    source=REACH_RULES,
)
def sections_few(facts: FlowFacts) -> str:
    """Tell where nothing shows how even the reach is."""
    if facts.sections >= ENOUGH_SECTIONS:
        return ""
    if facts.sections == 1:
        return (
            "One section and a slope: the flow is taken as uniform, without velocity heads and"
            f" losses; {ENOUGH_SECTIONS} sections would show whether it is."
        )
    return f"Two sections do not show how even the reach is; {ENOUGH_SECTIONS} are due."


@flow_rule(
    "measured-reach-expanding",
    "tell",
    meaning="the velocity head falls along the measured reach as a whole",
    source=REACH_RULES,
)
def reach_expanding(facts: FlowFacts) -> str:
    """Tell where losses are least certain."""
    heads = facts.velocity_heads_m
    if len(heads) < 2 or not heads[0] > heads[-1]:
        return ""
    return (
        f"The velocity head falls from {rounded(heads[0], 3)} to {rounded(heads[-1], 3)} m along"
        " the reach; how much of that is lost is uncertain: a contracting reach is better."
    )


@flow_rule(
    "measured-errors-left-out",
    "tell",
    meaning="errors of some measurements are not given, so that sd of n leaves them out",
)
def errors_left_out(facts: FlowFacts) -> str:
    """Tell what the standard deviation of n does not hold."""
    if not facts.errors_left_out:
        return ""
    names = enumerate_words(list(facts.errors_left_out))
    if not facts.errors_given:
        return f"No errors are given, so that n has no sd: say those of {names}."
    return f"The sd of n holds no error of {names}: it is a lower limit."


RULES: tuple[FlowRule, ...] = tuple(
    sorted(
        (
            fall_small,
            fall_under_velocity_head,
            losses_large,
            reach_short,
            supercritical,
            energy_rises,
            n_unusual,
            subreaches_differ,
            sections_few,
            reach_expanding,
            errors_left_out,
        ),
        key=lambda one: LEVELS.index(one.level),
    )
)
