"""Where each formula stands to its domain, in words; what to measure next."""

import numpy as np
import pytest

from roughness.comparison import METHODS, OtherN, Stems, Streams, missing, of_grass, of_stems
from roughness.comparison import other_roads as roads

GRAVEL = Streams(setting="channel", slope=0.004, radius=1.0, d50=0.045, d84=0.09)


def along(method: str, streams: Streams) -> OtherN:
    return next(other for other in roads(streams) if other.method == method)


def test_the_keys_of_the_methods_are_what_they_were_and_each_is_documented() -> None:
    assert [method.key for method in METHODS] == [
        "strickler-1923",
        "strickler-0342-ft",
        "meyer-peter-mueller-1948",
        "lane-carlson-1953",
        "em-1110-2-1601-velocity",
        "em-1110-2-1601-capacity",
        "keulegan-1938",
        "limerinos-1970",
        "limerinos-1970-d50",
        "bray-1979-d50",
        "bray-1979-d65",
        "bray-1979-d90",
        "bray-1979-log",
        "hey-1979",
        "griffiths-1981",
        "bathurst-1985",
        "hds-6-3.20",
        "hds-6-3.21",
        "ferguson-2007",
        "brownlie-1983-lower",
        "brownlie-1983-upper",
        "rickenmann-recking-2011",
        "jarrett-1984",
        "sauer-1990",
        "bray-1979-slope",
        "dingman-sharma-1997",
        "lacey",
    ]
    for method in METHODS:
        assert method.source and method.about and method.needs
        assert method.provenance in ("seen", "seen second hand", "memory")


def test_only_what_was_measured_gives_estimates() -> None:
    assert roads(Streams()) == ()
    assert [o.method for o in roads(Streams(slope=0.01))] == ["bray-1979-slope", "lacey"]
    assert "limerinos-1970" in [o.method for o in roads(GRAVEL)]
    assert "bray-1979-d90" not in [o.method for o in roads(GRAVEL)]


@pytest.mark.parametrize(
    ("slope", "domain", "says"),
    [
        (0.002, "inside", "in its tested range (0.002 to 0.04)"),
        (0.04, "inside", "in its tested range"),
        (0.05, "near", "the slope, 0.05, is not in its tested range (0.002 to 0.04)"),
        (0.06, "outside", "the slope, 0.06, is not in its tested range"),
        (0.0018, "near", "the slope, 0.0018, is not in"),
        (0.001, "outside", "the slope, 0.001, is not in"),
    ],
)
def test_jarretts_formula_says_where_the_slope_stands(slope: float, domain: str, says: str) -> None:
    other = along("jarrett-1984", Streams(setting="channel", slope=slope, radius=1.0))
    assert other.domain == domain and says in other.why
    assert other.error_percent == 28 and other.includes == "whole reach"


def test_a_deep_river_is_outside_jarretts_formula() -> None:
    other = along("jarrett-1984", Streams(setting="channel", slope=0.01, radius=6.0))
    assert other.domain == "outside"
    assert other.why == "the hydraulic radius, 6 m, is not in its tested range (0.152 to 2.13 m)"


def test_an_unknown_limit_is_said_and_never_taken_as_kept() -> None:
    other = along("strickler-1923", Streams(setting="channel", d50=0.045))
    assert other.domain == "near"
    assert "the hydraulic radius over d50 is not known" in other.why


def test_gravel_formulas_are_outside_on_sand_and_sand_formulas_on_gravel() -> None:
    sand = Streams(setting="channel", slope=0.0003, radius=2.0, d50=0.0004, gradation=1.6)
    assert along("limerinos-1970-d50", sand).domain == "outside"
    assert along("brownlie-1983-lower", sand).domain == "inside"
    gravel = Streams(setting="channel", slope=0.004, radius=1.0, d50=0.045, gradation=2.0)
    assert along("brownlie-1983-lower", gravel).domain == "outside"


def test_a_steep_sand_bed_is_in_the_upper_regime() -> None:
    steep = Streams(setting="channel", slope=0.008, radius=0.5, d50=0.0004, gradation=1.6)
    assert along("brownlie-1983-upper", steep).domain == "inside"
    lower = along("brownlie-1983-lower", steep)
    assert lower.domain == "outside" and "the slope, 0.008" in lower.why


def test_a_measured_velocity_decides_the_regime() -> None:
    def at(velocity: float) -> list[str]:
        streams = Streams(
            setting="channel",
            slope=0.001,
            radius=1.0,
            d50=0.0004,
            gradation=1.6,
            velocity=velocity,
        )
        return [along(f"brownlie-1983-{regime}", streams).domain for regime in ("lower", "upper")]

    # The limiting velocity is 1.74 * 0.001^(-1/3) * sqrt(1.65 g 0.0004) = 1.400 m/s.
    assert at(1.0) == ["inside", "outside"]
    assert at(1.4) == ["near", "near"]
    assert at(1.9) == ["outside", "inside"]


def test_gradation_follows_from_d84_over_d16() -> None:
    sizes = Streams(slope=0.0003, radius=2.0, d16=0.00025, d50=0.0004, d84=0.00064)
    given = Streams(slope=0.0003, radius=2.0, d50=0.0004, gradation=1.6)
    one, two = (along("brownlie-1983-lower", s).n for s in (sizes, given))
    assert one == pytest.approx(two, rel=1e-12)


def test_grains_that_stand_out_of_the_flow_leave_a_logarithm_without_value() -> None:
    bare = Streams(setting="channel", slope=0.02, radius=0.2, d50=0.6, d84=1.0)
    other = along("limerinos-1970", bare)
    assert other.n is None and other.domain == "outside"
    assert other.why.startswith("it gives no value here; the hydraulic radius over d84, 0.2,")
    assert along("ferguson-2007", bare).n is not None


def test_formulas_of_streams_are_outside_on_a_flood_plain() -> None:
    plain = Streams(setting="flood-plain", slope=0.004, radius=1.0, d50=0.045, d84=0.09)
    assert {other.domain for other in roads(plain)} == {"outside"}
    assert "flood plain" in along("limerinos-1970", plain).why


def test_small_slow_flow_is_outside_dingman_and_sharma() -> None:
    slow = Streams(setting="channel", slope=0.0001, radius=0.4, area=3.0)
    assert along("dingman-sharma-1997", slow).domain == "outside"
    fast = Streams(setting="channel", slope=0.003, radius=1.5, area=40.0)
    assert along("dingman-sharma-1997", fast).domain == "inside"


def test_lacey_is_at_best_near_since_nothing_tells_a_canal_in_regime() -> None:
    silt = Streams(setting="channel", slope=0.0002, d50=0.0001)
    other = along("lacey", silt)
    assert other.domain == "near" and "canals in silt" in other.why


def test_the_largest_depth_shapes_heys_value() -> None:
    flat = along("hey-1979", GRAVEL).n
    deep = along(
        "hey-1979",
        Streams(setting="channel", slope=0.004, radius=1.0, d50=0.045, d84=0.09, max_depth=1.5),
    ).n
    assert flat == pytest.approx(0.0359505, abs=1e-7) and deep == pytest.approx(0.0347099, abs=1e-7)


def test_many_reaches_are_computed_at_once() -> None:
    slopes = np.array([0.001, 0.01, 0.05, 0.1, np.nan])
    streams = Streams(setting="channel", slope=slopes, radius=1.0)
    jarrett = next(method for method in METHODS if method.key == "jarrett-1984")
    n = jarrett.n(streams)
    assert jarrett.domain(streams, n).tolist() == [2, 0, 1, 2, 2]
    assert np.isnan(n).tolist() == [False] * 4 + [True]


def test_what_would_help_most_is_said_first_and_how_to_take_it() -> None:
    found = missing(METHODS, Streams(setting="channel", slope=0.004, radius=1.0), {})
    assert found[0].measure == "pebble_count_mm"
    assert found[0].alone >= 10 and "limerinos-1970" in found[0].gives
    assert "stone" in found[0].how
    nothing = missing(METHODS, Streams(), {})
    assert {m.measure for m in nothing} >= {"pebble_count_mm", "slope", "hydraulic_radius_m"}


def test_what_cannot_help_is_not_asked_for() -> None:
    sand = Streams(setting="channel", slope=0.0003, radius=2.0, d50=0.0004)
    asked = {m.measure: m for m in missing(METHODS, sand, {})}
    assert asked["gradation"].gives == ("brownlie-1983-lower", "brownlie-1983-upper")
    assert "pebble_count_mm" not in asked
    plain = Streams(setting="flood-plain")
    others = {"stems": "vegetation-density"}
    assert [m.measure for m in missing(METHODS, plain, others)] == ["stems"]


def stems(height: float | None = None) -> Stems:
    return Stems(
        numbers=[48],
        diameters_m=[0.3],
        heights_m=[height],
        area_m2=450.0,
        n_boundary=0.035,
        drag=11.0,
    )


def test_stems_that_end_below_the_water_are_outside() -> None:
    emergent, submerged = of_stems(stems(), 1.2), of_stems(stems(0.6), 1.2)
    assert emergent.domain == "inside" and submerged.domain == "outside"
    assert emergent.n is not None and submerged.n is not None
    assert 0.035 < submerged.n < emergent.n


def test_grass_needs_slope_or_velocity_beside_the_radius() -> None:
    nan = float("nan")
    assert of_grass("C", 0.3, nan, nan) == ()
    assert [o.method for o in of_grass("C", 0.3, 0.02, nan)] == ["kouwen-hec-15"]
    assert [o.method for o in of_grass("C", 0.3, nan, 0.8)] == ["temple-1987"]
    assert [o.provenance for o in of_grass("C", 0.3, 0.02, 0.8)] == ["memory", "memory"]
    thin, flood = of_grass("A", 0.01, 0.001, nan)[0], of_grass("A", 3.0, nan, 2.0)[0]
    assert thin.n is None and thin.domain == "outside"
    assert flood.n is None and "36 ft2/s" in flood.why
