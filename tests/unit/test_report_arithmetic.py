"""The printed sums: every digit that was used, whatever values people set."""

from hypothesis import given
from hypothesis import strategies as st

from roughness.assessment.assessing import assess
from roughness.reports.arithmetic import figure, sums_of, together
from roughness.shelf.handbooks import load_handbook
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    Factors,
    Judgement,
    MeanderChoice,
    ObstructionChoice,
    Segment,
    VegetationChoice,
)

BOOK = load_handbook("usgs-wsp-2339")
ADDENDS = st.decimals("0.001", "0.09", places=7).map(float)
MULTIPLIERS = st.decimals("1", "1.3", places=4).map(float)


def own(kind: type[Choice], value: float) -> Choice:
    return kind(best=value, low=value * 0.75, high=value * 1.2, note="own")


@st.composite
def judged(draw: st.DrawFn) -> Factors:
    return Factors(
        base=own(BaseChoice, draw(ADDENDS)),  # type: ignore[arg-type]
        irregularity=own(Choice, draw(ADDENDS)),
        variation=own(Choice, draw(ADDENDS)),
        obstruction=own(ObstructionChoice, draw(ADDENDS)),  # type: ignore[arg-type]
        vegetation=own(VegetationChoice, draw(ADDENDS)),  # type: ignore[arg-type]
        meander=own(MeanderChoice, draw(MULTIPLIERS)),  # type: ignore[arg-type]
    )


def rebuilt(figures: str) -> float:
    return float(eval(figures.replace("×", "*").replace("^", "**")))


@given(judged())
def test_a_sum_comes_to_its_result_and_says_whether_that_is_exact(factors: Factors) -> None:
    estimate = assess(BOOK, Judgement(handbook=BOOK.key, setting="channel", factors=factors))
    (printed,) = sums_of(estimate, "channel")
    assert printed.symbols == "(nb + n1 + n2 + n3 + n4) × m"
    for line in printed.lines:
        n = getattr(estimate.n, line.word)
        assert abs(rebuilt(line.figures) - n) < 1e-9
        assert abs(float(line.result) - n) <= 0.5e-6 + 1e-12
        assert (line.equals == "=") == (abs(float(line.result) - n) <= 1e-12)


@given(judged(), judged(), st.integers(1, 99))
def test_bed_and_banks_come_together_to_n(bed: Factors, banks: Factors, percent: int) -> None:
    segments = (
        Segment(name="bed", perimeter_percent=float(percent), factors=bed),
        Segment(name="banks", perimeter_percent=100.0 - percent, factors=banks),
    )
    estimate = assess(BOOK, Judgement(handbook=BOOK.key, setting="channel", segments=segments))
    assert [one.segment for one in sums_of(estimate, "channel")] == ["bed", "banks"]
    whole = together(estimate)
    assert whole is not None
    for line in whole.lines:
        assert abs(rebuilt(line.figures) - getattr(estimate.n, line.word)) < 1e-6


def test_a_value_is_printed_as_the_tables_do_and_with_every_digit_it_has() -> None:
    told = [figure("base", value) for value in (0.03, 0.0285, 0.0, 0.0123456789)]
    assert told == ["0.030", "0.0285", "0", "0.0123456789"]
    assert figure("meander", 1.15) == "1.15"
