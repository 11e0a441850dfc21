"""What is wrong with a handbook file is said in one sentence, with its place."""

import pytest

from roughness.errors import HandbookError, UnknownNameError
from roughness.handbook import Handbook, parse_handbook
from roughness.handbook.classes import read_interval

ROW = """
[[{place}.grades]]
key = "{key}"
name = "{key}"
low = {low}
high = {high}
short = "short words"
criterion = "A sentence of words."
table = "table 1"
page = "8"
provenance = "seen"
{more}
"""
FACTOR = """
[{place}]
title = "Title"
question = "Which?"
source = "table 1"
"""


def row(place: str, key: str, low: float, high: float, more: str = "") -> str:
    return ROW.format(place=place, key=key, low=low, high=high, more=more)


def factor(setting: str, name: str, *rows: tuple[str, float, float, str]) -> str:
    place = f"{setting}.{name}"
    return FACTOR.format(place=place) + "".join(row(place, *each) for each in rows)


HEAD = """
key = "our-agency-2024"
title = "Tables of our own"
authors = "Agency"
year = 2024
publisher = "The agency"
good_for = "Small streams."
not_for = "Large ones."

[symbols]
base = "n0"
irregularity = "n1"
variation = "n2"
obstruction = "n3"
vegetation = "n4"
meander = "m"
"""
CHANNEL = (
    factor("channel", "base", ("earth", 0.02, 0.03, "best = 0.022"))
    + factor("channel", "irregularity", ("smooth", 0.0, 0.0, ""), ("rough", 0.01, 0.02, ""))
    + factor("channel", "variation", ("gradual", 0.0, 0.0, ""))
    + factor(
        "channel",
        "obstruction",
        ("few", 0.0, 0.01, 'blocked_percent = "< 10"'),
        ("many", 0.02, 0.03, 'blocked_percent = ">= 10"'),
    )
    + factor("channel", "vegetation", ("bare", 0.0, 0.0, ""))
    + factor(
        "channel",
        "meander",
        ("short", 1.0, 1.0, 'sinuosity = ">= 1 and < 1.3"'),
        ("long", 1.2, 1.2, 'sinuosity = ">= 1.3"'),
    )
)
PLAIN = (
    '\n[flood-plain.base]\ntitle = "T"\nquestion = "Q?"\nsource = "s"\ngrades_from = "channel"\n'
    + factor("flood-plain", "irregularity", ("smooth", 0.0, 0.0, ""))
    + factor("flood-plain", "obstruction", ("few", 0.0, 0.01, ""))
    + factor("flood-plain", "vegetation", ("bare", 0.0, 0.0, ""))
)
GOOD = HEAD + CHANNEL + PLAIN


def parsed(text: str) -> Handbook:
    return parse_handbook(text.encode(), "ours.toml")


def refusal(raw: str | bytes) -> str:
    with pytest.raises(HandbookError) as refused:
        parse_handbook(raw.encode() if isinstance(raw, str) else raw, "ours.toml")
    return str(refused.value)


def test_an_agencys_own_file_is_a_handbook_without_code() -> None:
    handbook = parsed(GOOD)
    assert handbook.citation == "Agency, 2024, Tables of our own: The agency"
    earth = handbook.grade("channel", "base", "earth")
    assert (earth.low, earth.best, earth.high) == (0.02, 0.022, 0.03)
    assert (earth.published.best, earth.best_is_middle) == (0.022, False)
    assert earth.source == "table 1, p. 8"
    assert handbook.grades("flood-plain", "base") == handbook.grades("channel", "base")
    assert handbook.rank("channel", "irregularity", "rough") == 1


def test_without_a_published_best_the_middle_stands_and_says_so() -> None:
    rough = parsed(GOOD).grade("channel", "irregularity", "rough")
    assert (rough.best, rough.best_is_middle) == (None, True)
    assert rough.published.best == pytest.approx(0.015)


def test_a_single_figure_is_a_point() -> None:
    text = GOOD.replace("low = 0.02\nhigh = 0.03\nshort", "value = 0.02\nshort", 1)
    earth = parsed(text.replace("best = 0.022", "")).grade("channel", "base", "earth")
    assert earth.published.is_point
    assert not earth.best_is_middle


def test_a_flood_plain_has_no_grades_of_variation_and_meander() -> None:
    handbook = parsed(GOOD)
    assert handbook.grades("flood-plain", "variation") == ()
    with pytest.raises(UnknownNameError, match="no table of meander"):
        handbook.grade("flood-plain", "meander", "short")


def test_an_unknown_grade_names_the_nearest_and_lists_the_known_ones() -> None:
    with pytest.raises(UnknownNameError, match="did you mean 'smooth'") as refused:
        parsed(GOOD).grade("channel", "irregularity", "smoth", where="reach 4")
    assert str(refused.value).startswith("reach 4: ")
    assert "smooth and rough" in str(refused.value)


def test_the_hash_is_the_same_with_both_kinds_of_line_ends() -> None:
    windows = GOOD.replace("\n", "\r\n")
    assert parsed(windows).sha256 == parsed(GOOD).sha256
    assert parsed(GOOD + "# remark\n").sha256 != parsed(GOOD).sha256


def test_a_byte_order_mark_is_allowed() -> None:
    assert parse_handbook(b"\xef\xbb\xbf" + GOOD.encode(), "x").key == "our-agency-2024"


def test_lines_of_a_long_text_become_one() -> None:
    text = GOOD.replace('"Small streams."', '"""Small\nstreams."""')
    assert parsed(text).good_for == "Small streams."


BROKEN_FILES = [
    (b"", ["it is empty"]),
    (b" \n\n", ["it is empty"]),
    (b'key = "\xff"', ["byte 8 is not UTF-8", "UTF-8"]),
    (b"#" * ((1 << 20) + 1), ["too large", "1048576"]),
    (b'key = "a"\ntitle = \n', ["line 2, column 9", "not TOML"]),
    (b'key = "a"\nkey = "b"\n', ["line 2", "not TOML"]),
    (b'key = "a', ["line 1, column 9", "not TOML"]),
    (b"a = " + b"[" * 100_000, ["nested too deep"]),
    (b"a = " + b"9" * 5000, ["thousands of digits"]),
    (HEAD.encode(), ["it has no table"]),
]


@pytest.mark.parametrize(("raw", "names"), BROKEN_FILES)
def test_a_file_that_is_no_handbook_is_refused(raw: bytes, names: list[str]) -> None:
    said = refusal(raw)
    assert said.startswith("ours.toml: ")
    assert "\n" not in said
    for name in names:
        assert name in said


# What was broken: the text replaced (once), by what, and what the sentence must name.
BROKEN_ROWS = [
    ("low = 0.02", "low = 0.04", ["channel.base.earth.low", "0.04 is above high 0.03"]),
    ("best = 0.022", "best = 0.05", ["channel.base.earth.best", "0.02 to 0.03"]),
    ("low = 0.02", "low = -0.02", ["channel.base.earth.low", "-0.02", "above 0"]),
    ("low = 0.01\n", "low = -0.01\n", ["channel.irregularity.rough.low", "0 or more"]),
    ("high = 0.03", "high = 3.0", ["channel.base.earth.high", "3 is too large"]),
    ("low = 1.2", "low = 0.9", ["channel.meander.long.low", "1 or more"]),
    ("low = 0.02", 'low = "0.02"', ["channel.base.earth.low", "'0.02'", "a number is due"]),
    ("low = 0.02", "low = true", ["channel.base.earth.low", "True", "a number is due"]),
    ("low = 0.02", "low = nan", ["channel.base.earth.low", "nan", "finite"]),
    ("high = 0.03", "high = inf", ["channel.base.earth.high", "inf", "finite"]),
    ("low = 0.02\n", "", ["channel.base.earth", "low and high"]),
    ("low = 0.02", "value = 0.02\nlow = 0.02", ["channel.base.earth", "given twice"]),
    ('key = "rough"', 'key = "smooth"', ["channel.irregularity.smooth.key", "two grades"]),
    ('key = "rough"', 'key = "Very rough"', ["channel.irregularity", "small letters"]),
    ('page = "8"', "page = 8", ["channel.base.earth.page", "text in quotes is due"]),
    ('page = "8"', 'pages = "8"', ["channel.base.earth.pages", "not known", "'page'"]),
    ('source = "table 1"', 'sauce = "x"', ["channel.base.sauce", "not known", "'source'"]),
    ("year = 2024", "yeer = 2024", ["yeer", "not known", "'year'"]),
    ("year = 2024", "year = 20.5", ["year", "20.5", "whole number"]),
    ("year = 2024\n", "", ["year", "missing"]),
    ('title = "Tables of our own"', 'title = " "', ["title", "empty"]),
    ('"Tables of our own"', r'"a\u001b[2Jb"', ["title", "control"]),
    ('"Tables of our own"', r'"a\u202eb"', ["title", "direction character"]),
    ('provenance = "seen"', 'provenance = "read"', ["provenance", "'read'", "second hand"]),
    ('table = "table 1"\n', "", ["channel.base.earth.table", "missing"]),
    (
        'short = "short words"',
        f'short = "{"x" * 45}"',
        ["channel.base.earth.short: it is too long; at most 44 characters"],
    ),
    ('meander = "m"', "", ["symbols.meander", "missing"]),
    ('meander = "m"', 'bends = "m"', ["symbols.bends", "not known"]),
    ("[channel.variation]", "[channel.variety]", ["channel.variety", "'variation'"]),
    ('"< 10"', '"< 11"', ["channel.obstruction.blocked_percent", "overlap", "< 11"]),
    ('"< 10"', '"<= 10"', ["channel.obstruction.blocked_percent", "<= 10 and >= 10 overlap"]),
    ('">= 10"', '"> 10"', ["channel.obstruction.blocked_percent", "no class holds 10;"]),
    ('"< 10"', '"< 9"', ["channel.obstruction.blocked_percent", "between 9 and 10"]),
    ('">= 10"', '">= 10 and < 60"', ["blocked_percent", "between 60 and 100"]),
    ('">= 1.3"', '">= 1.3 and < 2"', ["channel.meander.sinuosity", "above 2;"]),
    ('">= 1 and < 1.3"', '"> 1 and < 1.3"', ["channel.meander.sinuosity", "no class holds 1;"]),
    ('"< 10"', '"under 10"', ["channel.obstruction.few.blocked_percent", "'under 10'"]),
    ('"< 10"', '"> 10 and < 5"', ["channel.obstruction.few.blocked_percent", "holds no number"]),
    ('"< 10"', '"< 10 and < 5"', ["channel.obstruction.few.blocked_percent", "twice"]),
    (
        'blocked_percent = "< 10"',
        'sinuosity = "< 10"',
        ["channel.obstruction.few.sinuosity", "obstruction goes by blocked_percent"],
    ),
    (
        "best = 0.022",
        'depth_over_height = { moss = "< 1" }',
        ["channel.base.earth.depth_over_height.moss", "not known"],
    ),
    ('grades_from = "channel"', "", ["flood-plain.base", "no grades"]),
    ('grades_from = "channel"', 'grades_from = "flood-plain"', ["grades_from", "take over"]),
    ("[symbols]", 'flood_plains_from = "x"\n[symbols]', ["flood_plains_from", "of its own"]),
]


@pytest.mark.parametrize(("old", "new", "names"), BROKEN_ROWS)
def test_a_broken_handbook_is_refused_with_place_and_reason(
    old: str, new: str, names: list[str]
) -> None:
    assert old in GOOD
    said = refusal(GOOD.replace(old, new, 1))
    assert said.startswith("ours.toml: ")
    assert "\n" not in said
    for name in names:
        assert name in said


@pytest.mark.parametrize(
    "name", ["base", "irregularity", "variation", "obstruction", "vegetation", "meander"]
)
def test_a_channel_with_a_factor_too_few_is_refused(name: str) -> None:
    start = CHANNEL.index(f"\n[channel.{name}]")
    end = CHANNEL.find("\n[channel.", start + 1)
    text = HEAD + CHANNEL[:start] + (CHANNEL[end:] if end > 0 else "")
    assert f"channel.{name}: the table of {name} is missing" in refusal(text)


@pytest.mark.parametrize("name", ["variation", "meander"])
def test_a_flood_plain_with_a_factor_that_it_does_not_have_is_refused(name: str) -> None:
    said = refusal(GOOD + factor("flood-plain", name, ("minor", 1.0, 1.0, "")))
    assert f"flood-plain.{name}: a flood plain has no {name}" in said


def test_gaps_and_overlaps_pass_where_the_file_says_the_publication_has_them() -> None:
    gap = GOOD.replace('"< 10"', '"< 9"')
    overlap = GOOD.replace('"< 10"', '"<= 12"')
    flagged = "[channel.obstruction]\nmeasured_{}s = true"
    for text, flag in ((gap, "gap"), (overlap, "overlap")):
        refusal(text)
        parsed(text.replace("[channel.obstruction]", flagged.format(flag)))


def test_words_for_what_lies_above_the_last_class_allow_it_to_end() -> None:
    text = GOOD.replace('">= 10"', '">= 10 and <= 50"')
    assert "between 50 and 100" in refusal(text)
    parsed(text.replace("[channel.obstruction]", '[channel.obstruction]\nsays_above = "Split."'))


SIZES = "by_d50_mm = [[0.2, 0.01], [0.4, 0.02]]"


def test_values_by_size_span_their_range() -> None:
    text = GOOD.replace("low = 0.02\nhigh = 0.03\n", f"{SIZES}\n", 1).replace("best = 0.022", "")
    earth = parsed(text).grade("channel", "base", "earth")
    assert (earth.low, earth.high) == (0.01, 0.02)
    assert "channel.base.earth.by_d50_mm: the sizes do not grow" in refusal(
        text.replace("[0.4,", "[0.1,")
    )


def test_a_hostile_file_name_is_made_printable_in_the_sentence() -> None:
    with pytest.raises(HandbookError) as refused:
        parse_handbook(b"", "a\x1b[2J.toml")
    assert "\x1b" not in str(refused.value)


@pytest.mark.parametrize("text", ["< 5", "> 50", ">= 5 and < 15", "= 0", ">= 1.2 and <= 1.5"])
def test_a_class_of_numbers_is_printed_as_it_was_written(text: str) -> None:
    assert str(read_interval(text)) == text
