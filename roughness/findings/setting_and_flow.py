"""Rules about the setting, the handbook that serves it, and the regime of a sand bed."""

from typing import Final

import numpy as np

from roughness.findings.facts import Facts, Flags
from roughness.findings.rule import Case, rule
from roughness.findings.wording import in_words
from roughness.quantities.printing import show_addend, show_value

MOST_BLOCKED: Final = 50.0  # percent, the end of the flood-plain table
SAND: Final = "sand"

SAND_TABLE: Final = (
    "Arcement & Schneider 1989 (USGS WSP 2339), table 1: sand values are for upper-regime flow only"
)


def _sand_bed(facts: Facts) -> Flags:
    """Whether the row has a sand bed that flow can mould; flood plains never do."""
    sand: Flags = facts.in_channel & (facts.factors["base"].grade == SAND)
    return sand


@rule(
    "flood-plain-mostly-blocked",
    "stop",
    meaning="more than half of the flood plain's flow area is blocked: no published grade",
    source="Arcement & Schneider 1989 (USGS WSP 2339), table 3: grades end at 50 %",
    about="obstruction",
)
def flood_plain_mostly_blocked(facts: Facts) -> Case:
    """Stop: what blocks that much is not roughness any more."""
    chosen = facts.factors["obstruction"]
    blocked = chosen.number("blocked_percent")
    return Case(
        facts.on_flood_plain & (blocked > MOST_BLOCKED) & ~np.isnan(chosen.best),
        lambda row: (
            f"Of the flood plain {show_value(blocked[row])} % is blocked, and the published "
            "grades end at 50 %; take the obstruction out of the flow area or split the part."
        ),
    )


@rule(
    "lower-regime-from-table",
    "stop",
    meaning="a sand bed in lower regime has the table's value, which holds for upper regime only",
    source=SAND_TABLE,
    about="base",
)
def lower_regime_from_table(facts: Facts) -> Case:
    """Ripples and dunes make a sand bed much rougher than its grains."""
    base = facts.factors["base"]
    return Case(
        _sand_bed(facts) & (base.word("regime") == "lower") & ~(base.own_best & base.noted),
        lambda row: (
            f"The sand bed is in lower regime, but its base {show_addend(base.best[row])} rests on "
            "the table for upper regime; give a value for ripples or dunes, with a note."
        ),
    )


@rule(
    "lower-regime-own-value",
    "ask",
    meaning="a sand bed in lower regime has a noted value of one's own; the reviewer weighs it",
    source=SAND_TABLE,
    about="base",
)
def lower_regime_own_value(facts: Facts) -> Case:
    """No table of the method backs it."""
    base = facts.factors["base"]
    return Case(
        _sand_bed(facts) & (base.word("regime") == "lower") & base.own_best & base.noted,
        lambda row: (
            f"The sand bed is in lower regime and its base {show_addend(base.best[row])} is a "
            "value of the crew's own; does its note say which bed forms it stands for?"
        ),
    )


@rule(
    "regime-not-settled",
    "ask",
    meaning="the regime of a sand bed is in transition or unknown",
    source=SAND_TABLE,
    about="base",
)
def regime_not_settled(facts: Facts) -> Case:
    """In transition one flow can have two values of n."""
    regime = facts.factors["base"].word("regime")
    told = {"transition": "is in transition", "unknown": "is unknown"}
    return Case(
        _sand_bed(facts) & ((regime == "transition") | (regime == "unknown")),
        lambda row: (
            f"The regime of the sand bed {told[regime[row]]}, and the table's values hold for "
            "upper regime only; find the regime at this flow, or let the range cover both and say "
            "so in a note."
        ),
    )


@rule(
    "handbook-handed-over",
    "tell",
    meaning="the handbook asked for has no table for this setting, so another one was used",
    source="the handbooks themselves",
)
def handbook_handed_over(facts: Facts) -> Case:
    """Tell, since a record must say whose numbers it holds."""
    return Case(
        (facts.handbook != "")
        & (facts.asked_handbook != "")
        & (facts.handbook != facts.asked_handbook),
        lambda row: (
            f"The handbook '{facts.asked_handbook[row]}' has no table for a "
            f"{in_words(facts.setting[row])}; the values come from '{facts.handbook[row]}'."
        ),
    )


RULES = (
    flood_plain_mostly_blocked,
    lower_regime_from_table,
    lower_regime_own_value,
    regime_not_settled,
    handbook_handed_over,
)
