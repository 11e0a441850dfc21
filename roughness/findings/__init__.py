"""Judgement as data: one named rule each, a condition over columns, a sentence, a source.

A new check is one function in the file of its subject, named in that file's ``RULES``.
"""

from roughness.findings.facts import FactorFacts, Facts, nothing_chosen
from roughness.findings.over_survey import Estimated, Placed, find_over_survey
from roughness.findings.rule import Finding, Level, Rule, RuleInWords
from roughness.findings.rules import RULES, Met, find, met_rules, rule_table

__all__ = [
    "RULES",
    "Estimated",
    "FactorFacts",
    "Facts",
    "Finding",
    "Level",
    "Met",
    "Placed",
    "Rule",
    "RuleInWords",
    "find",
    "find_over_survey",
    "met_rules",
    "nothing_chosen",
    "rule_table",
]
