"""Judgement as data: one named rule each, a condition over columns, a sentence, a source.

A new check is one function in the file of its subject, named in that file's ``RULES``.
"""

from roughness.findings.facts import FactorFacts, Facts
from roughness.findings.rule import Finding, Level, Rule
from roughness.findings.rules import RULES, Met, find, met_rules

__all__ = ["RULES", "FactorFacts", "Facts", "Finding", "Level", "Met", "Rule", "find", "met_rules"]
