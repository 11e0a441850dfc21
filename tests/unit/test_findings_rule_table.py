"""The rules are documented, and their keys stay what they were."""

import re

from roughness.findings import rule_table

# Records and answers refer to these words: a key may be added here, never changed.
KEYS = [
    "outside-published-range",
    "own-value-without-note",
    "flood-plain-mostly-blocked",
    "lower-regime-from-table",
    "grains-stand-in-the-flow",
    "outside-published-range-noted",
    "range-narrow",
    "n-low-for-channel",
    "n-high-for-channel",
    "n-high-for-flood-plain",
    "grade-against-criterion",
    "short-stretch-for-sinuosity",
    "plants-not-in-grade",
    "bed-sizes-differ",
    "trees-counted-twice",
    "widening-counted-twice",
    "bends-counted-twice",
    "valley-slope-with-multiplier",
    "smoothest-base-in-nature",
    "boulders-counted-twice",
    "bank-plants-against-shape",
    "few-plants-for-their-value",
    "lower-regime-own-value",
    "regime-not-settled",
    "hydraulic-radius-beyond-method",
    "slope-steep",
    "few-grains-deep",
    "supercritical-reach",
    "inside-published-gap",
    "near-class-edge",
    "average-base-with-irregularity",
    "handbook-handed-over",
    "slope-little-tested",
    "jump-between-neighbours",
    "all-reaches-alike",
    "carried-over-unconfirmed",
    "driver-without-reason",
    "growth-differs",
    "made-by-record",
    "adopted-differs",
    "multiplier-over-bank",
    "no-visit",
    "merge-conflict",
    "composite-n-differs",
    "section-to-divide",
    "several-normal-depths",
    "bed-runs-backwards",
    "section-supercritical",
    "not-fully-rough",
    "several-critical-depths",
    "no-critical-depth",
    "separate-waters",
    "part-is-dry",
    "uneven-velocities",
    "equivalent-n-outside",
    "steep-bed-and-depth",
    "part-n-not-used",
    "measured-fall-small",
    "measured-fall-under-velocity-head",
    "measured-losses-large",
    "measured-reach-short",
    "measured-flow-supercritical",
    "measured-energy-rises",
    "measured-n-unusual",
    "measured-subreaches-differ",
    "measured-sections-few",
    "measured-reach-expanding",
    "measured-errors-left-out",
    "base-against-grain-formulas",
    "n-against-reach-formulas",
    "n-below-grains",
    "n-outside-channel-type",
    "sand-in-either-regime",
    "few-stones-counted",
    "size-against-count",
    "nothing-inside-its-domain",
]


def test_the_keys_of_the_rules_are_pinned_and_unique() -> None:
    assert [rule.key for rule in rule_table()] == KEYS
    assert len(set(KEYS)) == len(KEYS)


def test_a_key_is_words_joined_by_hyphens() -> None:
    assert all(re.fullmatch(r"[a-z]+(-[a-z]+)*", rule.key) for rule in rule_table())


def test_every_rule_names_its_source_and_its_meaning() -> None:
    for rule in rule_table():
        assert len(rule.source.split()) >= 3, rule.key
        assert len(rule.meaning.split()) >= 5, rule.key
        assert "\n" not in rule.meaning
        assert len(rule.meaning) <= 100


def test_what_was_only_remembered_of_a_publication_says_so() -> None:
    for rule in rule_table():
        if re.search(r"\b1[89]\d\d\b", rule.source) and "WSP 2339), table" not in rule.source:
            assert "memory" in rule.source or "largest n" in rule.source, rule.key
