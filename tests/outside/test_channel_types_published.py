"""Published n of channel types against the figures, row by row.

Chow, V.T., 1959, Open-channel hydraulics, table 5-6: least, usual, greatest. Figures: seen in the
MIT-licensed library fluids 1.3.1 (open_flow). Minor streams and flood plains were seen in two
further copies too; copies that differ are named beside the row. That the other figures are the
publication's, and the two rows of major streams and the grassed lining, is from memory.
"""

import pytest

from roughness.desk.cross_checking import channel_types

FIGURES: dict[str, tuple[float, float | None, float]] = {
    "plain-clean-straight": (0.025, 0.030, 0.033),
    "plain-straight-stones-weeds": (0.030, 0.035, 0.040),
    "plain-clean-winding": (0.033, 0.040, 0.045),
    "plain-winding-weeds-stones": (0.035, 0.045, 0.050),
    "plain-winding-low-stage": (0.040, 0.048, 0.055),
    # one copy (yumpu.com document 33208135, p. 7) says weeds too
    "plain-winding-more-stones": (0.045, 0.050, 0.060),
    "plain-sluggish-weedy": (0.050, 0.070, 0.080),
    # 0.070 in one copy (jon.sdsu.edu, table 2)
    "plain-very-weedy": (0.075, 0.100, 0.150),
    "mountain-gravel-cobbles": (0.030, 0.040, 0.050),
    "mountain-cobbles-boulders": (0.040, 0.050, 0.070),
    "pasture-short-grass": (0.025, 0.030, 0.035),
    "pasture-high-grass": (0.030, 0.035, 0.050),
    "field-no-crop": (0.020, 0.030, 0.040),
    "field-row-crops": (0.025, 0.035, 0.045),
    "field-field-crops": (0.030, 0.040, 0.050),
    "brush-scattered": (0.035, 0.050, 0.070),
    "brush-light-winter": (0.035, 0.050, 0.060),
    "brush-light-summer": (0.040, 0.060, 0.080),
    "brush-dense-winter": (0.045, 0.070, 0.110),
    # normal 0.010 in the same copy: a misprint
    "brush-dense-summer": (0.070, 0.100, 0.160),
    "willows-dense-summer": (0.110, 0.150, 0.200),
    "stumps-bare": (0.030, 0.040, 0.050),
    # normal 0.60 in the same copy: a misprint
    "stumps-sprouting": (0.050, 0.060, 0.080),
    "timber-below-branches": (0.080, 0.100, 0.120),
    "timber-in-branches": (0.100, 0.120, 0.160),
    # memory; not in the library
    "major-regular": (0.025, None, 0.060),
    # no normal value is published; 0.07 in the library
    "major-irregular": (0.035, None, 0.100),
    "earth-straight-new": (0.016, 0.018, 0.020),
    "earth-straight-weathered": (0.018, 0.022, 0.025),
    "earth-straight-gravel": (0.022, 0.025, 0.030),
    "earth-straight-short-grass": (0.022, 0.027, 0.033),
    "earth-winding-bare": (0.023, 0.025, 0.030),
    "earth-winding-grass": (0.025, 0.030, 0.033),
    "earth-winding-dense-weeds": (0.030, 0.035, 0.040),
    "earth-winding-rubble-sides": (0.028, 0.030, 0.035),
    "earth-winding-stony-bottom": (0.025, 0.035, 0.040),
    "earth-winding-cobble-bottom": (0.030, 0.040, 0.050),
    "dragline-bare": (0.025, 0.028, 0.033),
    "dragline-light-brush": (0.035, 0.050, 0.060),
    "rock-smooth": (0.025, 0.035, 0.040),
    "rock-jagged": (0.035, 0.040, 0.050),
    "unkept-dense-weeds": (0.050, 0.080, 0.120),
    "unkept-brush-on-sides": (0.040, 0.050, 0.080),
    "unkept-brush-high-stage": (0.045, 0.070, 0.110),
    "unkept-dense-brush": (0.080, 0.100, 0.140),
    "concrete-trowelled": (0.011, 0.013, 0.015),
    "concrete-floated": (0.013, 0.015, 0.016),
    "concrete-gravel-bottom": (0.015, 0.017, 0.020),
    "concrete-unfinished": (0.014, 0.017, 0.020),
    "concrete-sprayed-good": (0.016, 0.019, 0.023),
    "concrete-sprayed-wavy": (0.018, 0.022, 0.025),
    "walls-formed-concrete": (0.017, 0.020, 0.025),
    "walls-stone-in-mortar": (0.020, 0.023, 0.026),
    "walls-dry-rubble": (0.023, 0.033, 0.036),
    "masonry-cemented": (0.017, 0.025, 0.030),
    "masonry-dry": (0.023, 0.032, 0.035),
    "masonry-dressed": (0.013, 0.015, 0.017),
    # no normal value is published; 0.4 in the library
    "lined-with-plants": (0.030, None, 0.500),
}


def test_the_table_has_these_rows_and_no_others() -> None:
    assert [row.key for row in channel_types().rows] == list(FIGURES)


@pytest.mark.parametrize("key", FIGURES)
def test_a_row_has_the_published_figures(key: str) -> None:
    row = channel_types().one(key)
    assert (row.low, row.normal, row.high) == FIGURES[key]
    assert row.provenance in ("seen second hand", "memory")


def test_only_rows_seen_in_further_copies_are_not_from_memory() -> None:
    seen = {r.group for r in channel_types().rows if r.provenance == "seen second hand"}
    assert seen == {"minor stream on a plain", "mountain stream", "flood plain"}
