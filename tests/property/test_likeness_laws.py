"""Laws of likeness over random reaches."""

from hypothesis import given
from hypothesis import strategies as st

from roughness.comparison.analogues import analogues, facts_of_event
from roughness.comparison.likeness import ReachFacts, likeness
from roughness.comparison.measured_streams import BEDS, PLANTS, MeasuredStream
from roughness.desk.measured_streams import measured_streams
from roughness.survey.words import GROWTHS, SETTINGS

CATALOGUE = measured_streams().streams


def maybe(low: float, high: float) -> st.SearchStrategy[float | None]:
    return st.none() | st.floats(low, high)


facts = st.builds(
    ReachFacts,
    setting=st.sampled_from(SETTINGS),
    bed=st.lists(st.sampled_from(BEDS), max_size=2, unique=True).map(tuple),
    d50_mm=maybe(0.05, 2000),
    slope=maybe(1e-6, 0.3),
    hydraulic_radius_m=maybe(0.05, 20),
    depth_m=maybe(0.05, 20),
    plants=st.none() | st.lists(st.sampled_from(PLANTS), max_size=4, unique=True).map(tuple),
    growth=st.none() | st.sampled_from(GROWTHS),
)


@given(facts, facts)
def test_likeness_does_not_depend_on_who_is_compared_with_whom(
    here: ReachFacts, there: ReachFacts
) -> None:
    one, other = likeness(here, there), likeness(there, here)
    assert (one is None) == (other is None)
    if one is not None and other is not None:
        assert one.shared == other.shared
        assert abs(one.value - other.value) <= 1e-12


@given(facts, facts)
def test_nothing_is_more_alike_than_the_reach_itself(here: ReachFacts, there: ReachFacts) -> None:
    found, itself = likeness(here, there), likeness(here, here)
    if found is not None:
        assert itself is not None
        assert itself.value == 1.0
        assert 0.0 <= found.value <= 1.0
        assert found.shared <= itself.shared


@given(facts, facts)
def test_each_criterion_that_counts_is_told_in_words(here: ReachFacts, there: ReachFacts) -> None:
    found = likeness(here, there)
    if found is not None:
        untold = [reason for reason in found.reasons if "not known" in reason]
        assert found.shared == len(found.reasons) - len(untold)
        assert all(reason == reason.strip() and reason for reason in found.reasons)


@given(facts)
def test_every_stream_of_the_setting_is_ranked_or_named_as_unknown(here: ReachFacts) -> None:
    found = analogues(here, CATALOGUE)
    named = [one.stream.key for one in found.alike] + [stream.key for stream in found.unknown]
    assert sorted(named) == sorted(s.key for s in CATALOGUE if s.setting == here.setting)
    values = [one.likeness for one in found.alike]
    assert values == sorted(values, reverse=True)
    assert found.alike == analogues(here, reversed(CATALOGUE)).alike


@given(st.sampled_from([s for s in CATALOGUE if s.plants is not None or s.bed]))
def test_a_measured_flow_finds_itself_first(stream: MeasuredStream) -> None:
    for event in stream.events:
        first = analogues(facts_of_event(stream, event), CATALOGUE).alike[0]
        assert first.likeness == 1.0
        assert first.stream is stream
