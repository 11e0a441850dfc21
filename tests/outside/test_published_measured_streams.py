"""The catalogue of measured streams against the published figures, each with where it was read."""

import pytest

from roughness.comparison.measured_streams import MeasuredStream
from roughness.desk.measured_streams import measured_streams

FT = 0.3048
CATALOGUE = {stream.key: stream for stream in measured_streams().streams}

# Barnes 1967, USGS Water-Supply Paper 1849, contents page as stored at
# pubs.usgs.gov/wsp/wsp_1849/html/toc.html (seen): n of each stream, all events.
BARNES_CONTENTS = {
    "indian-fork-atwood": [0.026],
    "champlin-colorado-city": [0.027],
    "clark-fork-st-regis": [0.028],
    "clark-fork-missoula": [0.030],
    "columbia-the-dalles": [0.030],
    "salt-creek-roca": [0.030],
    "coeur-dalene-prichard": [0.032],
    "rio-chama-chamita": [0.032, 0.036],
    "salt-river-stewart-mtn": [0.032],
    "clearwater-kamiah": [0.033],
    "yakima-umtanum": [0.036],
    "mf-vermilion-danville": [0.037],
    "wenatchee-plain": [0.037],
    "bull-creek-ira": [0.041],
    "mf-flathead-essex": [0.041],
    "middle-oconee-athens": [0.042, 0.041, 0.044],
    "catherine-union": [0.043],
    "chiwawa-plain": [0.043],
    "murder-monticello": [0.045],
    "provo-hailstone": [0.045, 0.073],
    "rolling-fork-boston": [0.046, 0.097],
    "south-beaverdam-dewy-rose": [0.052, 0.047],
}
OTHERS = {
    # il.water.usgs.gov/proj/nvalues/db_barnes/sites/12464500.shtml (seen)
    "columbia-vernita": [0.024],
    # wwwrcamnl.wr.usgs.gov/sws/fieldmethods/Indirects/nvalues/0075.htm (seen)
    "rock-creek-darby": [0.075],
    # Wilson 1973, J. Research USGS 1(5), abstract at pubs.usgs.gov/publication/70161913 (seen)
    "hanging-moss-jackson": [0.022, 0.045, 0.070, 0.050, 0.070],
    # Arcement and Schneider 1989, USGS Water-Supply Paper 2339, figures 8, 14 and 20 (seen)
    "bayou-de-loutre-farmerville": [0.11],
    "flagon-bayou-libuse": [0.13],
    "thompson-creek-clara": [0.20],
}


@pytest.mark.parametrize("key", [*BARNES_CONTENTS, *OTHERS])
def test_n_is_the_published_one(key: str) -> None:
    assert [event.n for event in CATALOGUE[key].events] == (BARNES_CONTENTS | OTHERS)[key]


def test_nothing_else_is_in_the_catalogue() -> None:
    assert set(CATALOGUE) == set(BARNES_CONTENTS) | set(OTHERS)
    assert {stream.provenance for stream in CATALOGUE.values()} == {"seen"}
    assert all(stream.read_at for stream in CATALOGUE.values())
    assert all("U.S. Geological Survey" in stream.source for stream in CATALOGUE.values())


def test_a_stream_of_which_n_alone_was_read_says_nothing_more() -> None:
    for key in BARNES_CONTENTS:
        stream = CATALOGUE[key]
        assert (stream.bed, stream.d50_mm, stream.plants) == ((), None, None)
        for event in stream.events:
            assert (event.slope, event.depth_m, event.hydraulic_radius_m) == (None, None, None)


def test_the_columbia_at_vernita_is_told_in_both_systems() -> None:
    (event,) = CATALOGUE["columbia-vernita"].events
    assert event.discharge_m3s == pytest.approx(406308.8 * FT**3, rel=1e-6)
    assert event.area_m2 == pytest.approx(48566.7 * FT**2, rel=1e-6)
    assert event.hydraulic_radius_m == pytest.approx(27.94 * FT, rel=1e-6)
    assert event.velocity_ms == pytest.approx(8.37 * FT, rel=1e-6)
    assert event.slope == 0.000194
    assert event.original["discharge_ft3s"] == 406308.8


def test_the_bed_of_rock_creek_is_the_published_one() -> None:
    rock = CATALOGUE["rock-creek-darby"]
    assert (rock.d50_mm, rock.d84_mm, rock.bed) == (220, 415, ("boulders",))
    assert rock.events[0].discharge_m3s == pytest.approx(1500 * FT**3, rel=1e-6)


@pytest.mark.parametrize(
    ("key", "depth_ft", "date"),
    [
        ("bayou-de-loutre-farmerville", 3.7, "1973-03-18"),
        ("flagon-bayou-libuse", 3.2, "1971-12-07"),
        ("thompson-creek-clara", 2.9, "1971-03-03"),
    ],
)
def test_depth_and_date_on_the_wooded_plains(key: str, depth_ft: float, date: str) -> None:
    plain: MeasuredStream = CATALOGUE[key]
    assert plain.setting == "flood-plain"
    assert plain.events[0].depth_m == pytest.approx(depth_ft * FT, rel=1e-6)
    assert plain.events[0].date == date


def test_the_radius_of_hanging_moss_creek_follows_from_the_trapezoid_as_dug() -> None:
    # Bottom 50 ft, side slopes 2 to 1, depth 5.5 ft; velocities 7.8, 3.2 and 2.0 ft/s.
    area, perimeter = 50 * 5.5 + 2 * 5.5**2, 50 + 2 * 5.5 * 5**0.5
    events = CATALOGUE["hanging-moss-jackson"].events[:3]
    for event, velocity in zip(events, (7.8, 3.2, 2.0), strict=True):
        assert event.hydraulic_radius_m == pytest.approx(area / perimeter * FT, rel=1e-6)
        assert event.derived == ("hydraulic_radius_m",)
        assert event.velocity_ms == pytest.approx(velocity * FT, rel=1e-6)
        assert event.slope is None
