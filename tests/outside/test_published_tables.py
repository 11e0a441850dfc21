"""Every row of the shipped handbooks against the published figures.

How each figure was seen is written beside it: "seen" in the publication or a copy of it,
"quoted" in a text that quotes it, "memory" recalled and not read yet.
"""

import pytest

from roughness import load_handbook
from roughness.survey.words import SETTINGS, Factor, Setting, factors_of

Table = dict[Factor, dict[str, tuple[float, float]]]

# Chow, V.T., 1959, Open-channel hydraulics, table 5-5 (after Cowan, 1956): all figures
# quoted, in public engineering memo 22015-ID-HI-MC-00-B, 'Cuadro 2.3', and in the
# hydrology baseline PR28, 'Tabla 4-1', which agree. Fasken (1963) reprints the procedure:
# seen there are earth (p. B.2), obstruction (p. B.4) and the multiplier (p. B.6); its other
# rows are from memory and equal Chow's.
CHOW_TABLE_5_5: Table = {
    "base": {
        "earth": (0.020, 0.020),
        "rock-cut": (0.025, 0.025),
        "fine-gravel": (0.024, 0.024),
        "coarse-gravel": (0.028, 0.028),
    },
    "irregularity": {
        "smooth": (0.000, 0.000),
        "minor": (0.005, 0.005),
        "moderate": (0.010, 0.010),
        "severe": (0.020, 0.020),
    },
    "variation": {
        "gradual": (0.000, 0.000),
        "alternating-occasionally": (0.005, 0.005),
        "alternating-frequently": (0.010, 0.015),
    },
    "obstruction": {
        "negligible": (0.000, 0.000),
        "minor": (0.010, 0.015),
        "appreciable": (0.020, 0.030),
        "severe": (0.040, 0.060),
    },
    "vegetation": {
        "none": (0.000, 0.000),  # not published: common practice, no source
        "low": (0.005, 0.010),
        "medium": (0.010, 0.025),
        "high": (0.025, 0.050),
        "very-high": (0.050, 0.100),
    },
    "meander": {
        "minor": (1.00, 1.00),
        "appreciable": (1.15, 1.15),
        "severe": (1.30, 1.30),
    },
}

# U.S. Geological Survey Water-Supply Paper 2339, table 1. Average column: quoted in a public
# teaching text on n of straight uniform channels; sand: seen in a scan; smooth column: memory.
WSP_TABLE_1: dict[str, tuple[float, float]] = {
    "concrete": (0.012, 0.018),
    "firm-soil": (0.025, 0.032),
    "sand": (0.012, 0.026),
    "coarse-sand": (0.026, 0.035),
    "gravel": (0.028, 0.035),
    "cobble": (0.030, 0.050),
    "boulder": (0.040, 0.070),
    "concrete-smooth": (0.011, 0.011),
    "rock-cut": (0.025, 0.025),
    "firm-soil-smooth": (0.020, 0.020),
    "fine-gravel-smooth": (0.024, 0.024),
    "coarse-gravel-smooth": (0.026, 0.026),
}
# Table 1, median size in mm and n: seen in a scan of the report.
WSP_SAND = [
    (0.2, 0.012),
    (0.3, 0.017),
    (0.4, 0.020),
    (0.5, 0.022),
    (0.6, 0.023),
    (0.8, 0.025),
    (1.0, 0.026),
]
WSP_CHANNEL: Table = {
    "base": WSP_TABLE_1,
    # Table 2: quoted in a chart of the modified method and in a road manual (3.707.104.B).
    "irregularity": {
        "smooth": (0.000, 0.000),
        "minor": (0.001, 0.005),
        "moderate": (0.006, 0.010),
        "severe": (0.011, 0.020),
    },
    "variation": {
        "gradual": (0.000, 0.000),
        "alternating-occasionally": (0.001, 0.005),
        "alternating-frequently": (0.010, 0.015),
    },
    "obstruction": {
        "none": (0.000, 0.000),  # not published: common practice, no source
        "negligible": (0.000, 0.004),
        "minor": (0.005, 0.015),
        "appreciable": (0.020, 0.030),
        "severe": (0.040, 0.050),  # memory
    },
    # Table 2: quoted in a stormwater design guide that cites the report.
    "vegetation": {
        "none": (0.000, 0.000),  # not published: common practice, no source
        "small": (0.002, 0.010),
        "medium": (0.010, 0.025),
        "large": (0.025, 0.050),
        "very-large": (0.050, 0.100),
    },
    # Table 2: memory; the multipliers alone also quoted.
    "meander": {
        "minor": (1.00, 1.00),
        "appreciable": (1.15, 1.15),
        "severe": (1.30, 1.30),
    },
}
# Table 3: quoted in Morris and Fan, Reservoir sedimentation handbook, table 9.4; very large
# and extreme vegetation in a land-cover table that cites table 3.
WSP_FLOOD_PLAIN: Table = {
    "base": WSP_TABLE_1,
    "irregularity": {
        "smooth": (0.000, 0.000),
        "minor": (0.001, 0.005),
        "moderate": (0.006, 0.010),
        "severe": (0.011, 0.020),
    },
    "obstruction": {
        "none": (0.000, 0.000),  # not published: common practice, no source
        "negligible": (0.000, 0.004),
        "minor": (0.005, 0.019),
        "appreciable": (0.020, 0.030),
    },
    "vegetation": {
        "none": (0.000, 0.000),  # not published: common practice, no source
        "small": (0.001, 0.010),
        "medium": (0.011, 0.025),
        "large": (0.026, 0.050),
        "very-large": (0.050, 0.100),
        "extreme": (0.100, 0.200),
    },
}
TABLES: dict[tuple[str, Setting], Table] = {
    ("cowan-1956", "channel"): CHOW_TABLE_5_5,
    ("scs-1963", "channel"): CHOW_TABLE_5_5,
    ("usgs-wsp-2339", "channel"): WSP_CHANNEL,
    ("usgs-wsp-2339", "flood-plain"): WSP_FLOOD_PLAIN,
}
COLUMNS = [(*where, factor) for where, table in TABLES.items() for factor in table]


@pytest.mark.parametrize(("key", "setting", "factor"), COLUMNS)
def test_every_row_has_the_published_range_in_the_published_order(
    key: str, setting: Setting, factor: Factor
) -> None:
    rows = [(g.key, (g.low, g.high)) for g in load_handbook(key).grades(setting, factor)]
    assert rows == list(TABLES[key, setting][factor].items())


def test_nothing_is_shipped_that_is_not_checked_here() -> None:
    shipped = {
        (key, setting, factor)
        for key in ("cowan-1956", "scs-1963", "usgs-wsp-2339")
        for setting in SETTINGS
        if load_handbook(key).has(setting)
        for factor in factors_of(setting)
    }
    assert shipped == set(COLUMNS)


@pytest.mark.parametrize(("d50_mm", "n"), WSP_SAND)
@pytest.mark.parametrize("setting", SETTINGS)
def test_sand_has_the_published_n_at_each_published_size(
    setting: Setting, d50_mm: float, n: float
) -> None:
    sand = load_handbook("usgs-wsp-2339").grade(setting, "base", "sand")
    at = sand.published_at(d50_mm)
    assert at is not None
    assert (at.low, at.best, at.high) == (n, n, n)
    assert len(sand.by_d50_mm) == len(WSP_SAND)


SYMBOLS = {
    "cowan-1956": ["n0", "n1", "n2", "n3", "n4", "m5"],  # Chow (1959), equation 5-12
    "scs-1963": ["n0", "n1", "n2", "n3", "n4", "m"],
    "usgs-wsp-2339": ["nb", "n1", "n2", "n3", "n4", "m"],
}


@pytest.mark.parametrize(("key", "symbols"), SYMBOLS.items())
def test_a_handbook_uses_the_symbols_of_its_publication(key: str, symbols: list[str]) -> None:
    handbook = load_handbook(key)
    assert [handbook.symbols[f] for f in factors_of("channel")] == symbols


def test_only_rows_that_were_read_name_a_page() -> None:
    for key in ("cowan-1956", "scs-1963", "usgs-wsp-2339"):
        handbook = load_handbook(key)
        for setting, tables in handbook.tables.items():
            for factor in tables:
                for grade in handbook.grades(setting, factor):
                    if grade.page is not None:
                        assert (key, grade.provenance) == ("scs-1963", "seen")
    guide = load_handbook("scs-1963")
    assert guide.grade("channel", "base", "earth").source == "step 1, p. B.2"
    assert guide.grade("channel", "obstruction", "minor").source == "step 4, p. B.4"
    assert guide.grade("channel", "meander", "severe").source == "step 6, p. B.6"


@pytest.mark.parametrize(
    ("key", "setting", "factor", "grade", "provenance"),
    [
        ("usgs-wsp-2339", "channel", "base", "sand", "seen"),
        ("usgs-wsp-2339", "channel", "base", "cobble", "seen second hand"),
        ("usgs-wsp-2339", "channel", "base", "concrete-smooth", "memory"),
        ("usgs-wsp-2339", "channel", "obstruction", "severe", "memory"),
        ("usgs-wsp-2339", "channel", "meander", "appreciable", "memory"),
        ("usgs-wsp-2339", "flood-plain", "vegetation", "extreme", "seen second hand"),
        ("usgs-wsp-2339", "flood-plain", "vegetation", "none", "ours"),
        ("cowan-1956", "channel", "obstruction", "severe", "seen second hand"),
        ("cowan-1956", "channel", "vegetation", "none", "ours"),
        ("scs-1963", "channel", "irregularity", "minor", "memory"),
        ("scs-1963", "channel", "obstruction", "minor", "seen"),
    ],
)
def test_a_row_says_how_its_figures_were_come_by(
    key: str, setting: Setting, factor: Factor, grade: str, provenance: str
) -> None:
    assert load_handbook(key).grade(setting, factor, grade).provenance == provenance


def test_the_smooth_column_is_marked_as_a_lower_bound_and_listed_last() -> None:
    rows = load_handbook("usgs-wsp-2339").grades("channel", "base")
    assert [row.lower_bound for row in rows] == [False] * 7 + [True] * 5


# Published disagreements that a reader of the tables must be able to find.
@pytest.mark.parametrize(
    ("key", "figures"),
    [
        ("usgs-wsp-2339", ("0.025 to 0.032", "0.020 to 0.030")),  # firm soil, FHWA-TS-84-204
        ("usgs-wsp-2339", ("0.026", "0.028")),  # coarse gravel
        ("usgs-wsp-2339", ("0.040 to 0.050", "0.040 to 0.060")),  # severe obstruction
        ("usgs-wsp-2339", ("0.005 to 0.015", "0.005 to 0.019")),  # minor obstruction
        ("cowan-1956", ("1.05", "1.15")),  # multiplier in one regional report
        ("cowan-1956", ("0.030 for earth", "0.010 to 0.020")),  # a student's copy
        ("scs-1963", ("0.016 to 0.018", "0.020")),  # best earth channels, page B.2
    ],
)
def test_a_published_contradiction_is_noted_in_one_place(
    key: str, figures: tuple[str, ...]
) -> None:
    notes = load_handbook(key).notes
    assert any(all(figure in note for figure in figures) for note in notes)
