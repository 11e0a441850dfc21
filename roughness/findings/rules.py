"""All rules that look at one estimate, and how they are applied to columns of facts."""

from dataclasses import dataclass

import numpy as np

from roughness.findings import (
    criteria,
    cross_check,
    domain,
    double_counting,
    measured_flow,
    merge_conflict,
    over_section,
    over_survey,
    ranges,
    setting_and_flow,
    where_it_grows,
)
from roughness.findings.facts import Facts
from roughness.findings.rule import LEVELS, Case, Finding, Rule, RuleInWords
from roughness.quantities.foreign_text import printable
from roughness.survey.words import Factor

SUBJECTS = (ranges, criteria, double_counting, where_it_grows, setting_and_flow, domain)

# Worst first; within a level in the order of the subjects above and of each one's list.
RULES: tuple[Rule, ...] = tuple(
    sorted((r for subject in SUBJECTS for r in subject.RULES), key=lambda r: LEVELS.index(r.level))
)


@dataclass(frozen=True, slots=True)
class Met:
    """A rule that some rows meet, for one factor or for the whole."""

    rule: Rule
    factor: Factor | None
    rows: tuple[int, ...]
    """Indices of the rows it is met in, ascending."""
    case: Case


def met_rules(facts: Facts) -> list[Met]:
    """Return the rules that any row meets, worst first, without writing a sentence yet.

    Parameters
    ----------
    facts : Facts
        Columns of N rows.

    Returns
    -------
    list of Met
        Empty where nothing is to be said. This is what large tables need: only keys.
    """
    found = []
    # Absurd measurements may overflow; infinity compares as it should.
    with np.errstate(all="ignore"):
        for rule in RULES:
            for factor in rule.factors:
                case = rule.check(facts, factor)
                if case.where.any():
                    rows = np.broadcast_to(case.where, (len(facts),)).nonzero()[0]
                    found.append(Met(rule, factor, tuple(rows.tolist()), case))
    return found


def find(facts: Facts) -> list[list[Finding]]:
    """Return the findings of each row, worst first, in a stable order.

    Parameters
    ----------
    facts : Facts
        Columns of N rows.

    Returns
    -------
    list of list of Finding
        One list a row. A row does not depend on the rows beside it.
    """
    found: list[list[Finding]] = [[] for _ in range(len(facts))]
    names = np.broadcast_to(facts.segment, (len(facts),))
    with np.errstate(all="ignore"):
        for met in met_rules(facts):
            for row in met.rows:
                says = met.case.says(row)
                if name := str(names[row]):
                    says = f"{printable(name)}: {says}"
                found[row].append(Finding(met.rule.level, met.rule.key, met.factor, says))
    return found


def rule_table() -> tuple[RuleInWords, ...]:
    """Return every rule in words: an estimate's, a survey's, a section's and more."""
    whole_survey = (*over_survey.RULES, merge_conflict.RULE)
    of_water = (*over_section.RULES, *measured_flow.RULES)
    return (*RULES, *whole_survey, *of_water, *cross_check.RULES)
