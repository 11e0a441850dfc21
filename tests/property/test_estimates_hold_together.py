"""Laws of an estimate over random judgements of all three handbooks."""

import json
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from roughness import estimate, load_handbook
from roughness.survey.words import Setting, factors_of

HANDBOOKS: list[tuple[str, Setting]] = [
    ("usgs-wsp-2339", "channel"),
    ("usgs-wsp-2339", "flood-plain"),
    ("cowan-1956", "channel"),
    ("scs-1963", "channel"),
]


@st.composite
def judgements(draw: st.DrawFn) -> dict[str, Any]:
    key, setting = draw(st.sampled_from(HANDBOOKS))
    handbook = load_handbook(key)
    factors: dict[str, Any] = {}
    for factor in factors_of(setting):
        grades = [g for g in handbook.grades(setting, factor) if not g.by_d50_mm]
        grade = draw(st.sampled_from(grades))
        choice: dict[str, Any] = {"grade": grade.key}
        if draw(st.booleans()):
            share = draw(st.floats(0, 1))
            choice["best"] = grade.low + share * (grade.high - grade.low)
        factors[factor] = choice
    return {
        "handbook": key,
        "setting": setting,
        "factors": factors,
        "dependence": draw(st.floats(0, 1)),
        "shape": draw(st.sampled_from(["triangular", "uniform"])),
    }


@settings(max_examples=60, deadline=None)
@given(judgements())
def test_low_best_high_percentiles_and_shares_hold_together(document: dict[str, Any]) -> None:
    result = estimate(document)
    n, s = result.n, result.spread
    assert n.low <= n.best <= n.high
    slack = 1e-9
    assert n.low - slack <= s.p05 <= s.p16 <= s.p50 <= s.p84 <= s.p95 <= n.high + slack
    shares = [entry.share_of_variance for entry in result.factors]
    assert all(0 <= share <= 1 + slack for share in shares)
    assert abs(sum(shares) - 1) < 1e-9 or (s.sd < 1e-12 and sum(shares) == 0)
    assert not result.stands_stopped


@settings(max_examples=40, deadline=None)
@given(judgements(), st.data())
def test_a_wider_choice_never_narrows_n_and_a_rougher_one_never_lowers_it(
    document: dict[str, Any], data: st.DataObject
) -> None:
    factor = data.draw(st.sampled_from(sorted(document["factors"])))
    before = estimate(document)
    entry = next(e for e in before.factors if e.factor == factor)
    wider = json.loads(json.dumps(document))
    wider["factors"][factor] |= {
        "best": entry.best,
        "low": entry.low * data.draw(st.floats(0.5, 1)),
        "high": entry.high * data.draw(st.floats(1, 1.5)),
        "note": "widened",
    }
    after = estimate(wider)
    assert after.n.low <= before.n.low + 1e-15 and after.n.high >= before.n.high - 1e-15
    assert after.n.best == before.n.best
    rougher = json.loads(json.dumps(wider))
    rougher["factors"][factor]["best"] = wider["factors"][factor]["high"]
    assert estimate(rougher).n.best >= after.n.best
    assert estimate(rougher).spread.p50 >= after.spread.p50 - 1e-6
