"""A part whose bed and banks are told apart."""

import numpy as np
import pytest

from roughness.additive import (
    envelope_of_segments,
    quantiles,
    shares_of_segments,
    shares_of_variance,
    spread,
    spread_of_segments,
)
from roughness.hydraulics import horton_einstein

Segment = tuple[list[float], list[float], list[float]]
BED: Segment = (
    [0.020, 0.001, 0.0, 0.002, 0.0, 1.0],
    [0.025, 0.004, 0.0, 0.005, 0.0, 1.0],
    [0.032, 0.008, 0.0, 0.012, 0.0, 1.0],
)
BANKS: Segment = (
    [0.020, 0.001, 0.0, 0.002, 0.025, 1.0],
    [0.025, 0.004, 0.0, 0.005, 0.040, 1.0],
    [0.032, 0.008, 0.0, 0.012, 0.050, 1.0],
)


def test_one_segment_is_its_own_part() -> None:
    alone, part = spread(*BANKS), spread_of_segments([BANKS], [100])
    for name in ("p05", "p16", "p50", "p84", "p95"):
        assert getattr(part, name) == pytest.approx(getattr(alone, name), abs=1e-7)
    assert (part.mean, part.sd) == pytest.approx((alone.mean, alone.sd), rel=1e-6)


def test_every_percentile_joins_the_same_percentiles() -> None:
    part = spread_of_segments([BED, BANKS], [60, 40])
    p05 = [quantiles(*s, [0.05])[0] for s in (BED, BANKS)]
    assert part.p05 == pytest.approx(horton_einstein(p05, [60, 40]), abs=1e-7)


def test_mean_and_deviation_are_those_of_the_quantile_function() -> None:
    p = (np.arange(4000) + 0.5) / 4000
    n = horton_einstein(np.stack([quantiles(*s, p) for s in (BED, BANKS)], axis=-1), [60, 40])
    part = spread_of_segments([BED, BANKS], [60, 40])
    assert part.mean == pytest.approx(n.mean(), rel=1e-6)
    assert part.sd == pytest.approx(n.std(), rel=1e-4)


def test_envelope_joins_lows_bests_and_highs() -> None:
    part = envelope_of_segments([BED, BANKS], [60, 40])
    assert part.low == pytest.approx(horton_einstein([0.023, 0.048], [60, 40]))
    assert part.best == pytest.approx(horton_einstein([0.034, 0.074], [60, 40]))
    assert part.high == pytest.approx(horton_einstein([0.052, 0.102], [60, 40]))


def test_shares_add_to_one_and_leave_out_what_does_not_vary() -> None:
    shares = shares_of_segments([BED, BANKS], [60, 40])
    assert shares.shape == (2, 6)
    assert shares.sum() == pytest.approx(1)
    assert shares[0, 4] == 0 < shares[1, 4]
    assert (shares[:, [2, 5]] == 0).all()


def test_shares_of_one_segment_are_those_of_the_part() -> None:
    assert shares_of_segments([BANKS], [1])[0] == pytest.approx(shares_of_variance(*BANKS))


def test_shares_follow_the_slope_of_the_composite_n() -> None:
    def of_part(shift: float) -> float:
        n = [np.mean([BED[i][:5] for i in range(3)], axis=0).sum() + shift,
             np.mean([BANKS[i][:5] for i in range(3)], axis=0).sum()]  # fmt: skip
        return float(horton_einstein(n, [60, 40]))

    slope_bed = (of_part(1e-6) - of_part(-1e-6)) / 2e-6
    only_bed_varies = (BANKS[1], BANKS[1], BANKS[1])
    still = shares_of_segments([BED, only_bed_varies], [60, 40])
    assert still[1].sum() == 0
    assert still[0].sum() == pytest.approx(1)
    both = shares_of_segments([BED, BANKS], [60, 40])
    # base has the same deviation in both segments, so its shares stand as the slopes do.
    n = [np.mean(s, axis=0)[:5].sum() for s in (BED, BANKS)]
    assert both[0, 0] / both[1, 0] == pytest.approx(60 / 40 * (n[0] / n[1]) ** 0.5)
    assert slope_bed == pytest.approx(0.6 * (n[0] / of_part(0)) ** 0.5, rel=1e-6)


def test_segments_of_points_have_no_shares() -> None:
    still = (BED[1], BED[1], BED[1])
    assert not shares_of_segments([still, still], [1, 1]).any()
    nothing: Segment = ([0.0] * 6, [0.0] * 6, [0.0] * 6)
    assert not shares_of_segments([nothing], [1]).any()
