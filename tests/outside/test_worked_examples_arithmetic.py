"""Worked examples that others printed, recomputed from their own factors.

Sources without a publication number are public environmental filings (Chile, hydrology
annexes): practice, not authority; only figures were taken. ``printed`` is what the source
prints; a computed n agrees when it rounds to it at the printed number of decimals.
"""

import pytest

from roughness.additive import combine, envelope
from roughness.quantities.printing import rounded
from roughness.quantities.ranges import Range, point
from roughness.survey.words import FACTORS

Six = tuple[float, float, float, float, float, float]

PRINTED: dict[str, tuple[Six, str]] = {
    # Soil Conservation Service, National Engineering Handbook 5, supplement B, p. B.7 (Cowan
    # 1956), Camp Creek dredged channel near Seymour, Illinois. The description was read; the
    # factors and the result are from memory.
    "camp creek": ((0.02, 0.01, 0.0, 0.0, 0.08, 1.0), "0.11"),
    # Cosumnes River at Michigan Bar, California, public research notebook (prints 0.08 for
    # irregularity, a slip for 0.008: only that gives the printed sum).
    "cosumnes, channel": ((0.03, 0.008, 0.0, 0.01, 0.0, 1.0), "0.048"),
    "cosumnes, banks": ((0.03, 0.008, 0.0, 0.01, 0.03, 1.0), "0.078"),
    # Public environmental filing, Coloane (Ancud), tables 3.1 and 3.2.
    "coloane": ((0.02, 0.005, 0.005, 0.0, 0.005, 1.15), "0.040"),
    # Public environmental filing, Arena (Taltal), channel C1, tables 6.1 and 6.2.
    "arena c1": ((0.02, 0.0, 0.0, 0.0, 0.005, 1.0), "0.025"),
    # Public environmental filing, Zaldivar, model LAT_14, table 3-1.
    "zaldivar lat 14": ((0.02, 0.005, 0.01, 0.01, 0.0, 1.0), "0.045"),
    # Public environmental filing, Corniglia, tables 16 and 17.
    "corniglia a": ((0.02, 0.0, 0.0, 0.01, 0.008, 1.0), "0.038"),
    "corniglia b": ((0.02, 0.0, 0.0, 0.01, 0.018, 1.0), "0.048"),
    # Public environmental filing, Llanos de Rungue, C_04, table 2-2.
    "rungue c04": ((0.02, 0.005, 0.0, 0.015, 0.012, 1.0), "0.052"),
    # Public environmental filing, Volcan Lanin, rio Amantible, table 4.1 (adopts 0.045).
    "lanin": ((0.024, 0.005, 0.0, 0.005, 0.01, 1.0), "0.044"),
    # Public environmental filing, Quebrada San Ramon (Taltal), table 3.10.
    "san ramon": ((0.028, 0.01, 0.0, 0.01, 0.0, 1.0), "0.048"),
    # Public environmental filing, El Sauce (Huasco), table 5, channels 1, 4, 5 and 10; the
    # table has no multiplier, 1 is implied.
    "el sauce 1": ((0.02, 0.005, 0.005, 0.0, 0.005, 1.0), "0.035"),
    "el sauce 4": ((0.024, 0.005, 0.005, 0.0, 0.005, 1.0), "0.039"),
    "el sauce 5": ((0.028, 0.005, 0.005, 0.0, 0.005, 1.0), "0.043"),
    "el sauce 10": ((0.028, 0.005, 0.005, 0.012, 0.025, 1.0), "0.075"),
    # Public environmental filing, Santa Graciela, Estero Meco, table 3.
    "meco, main section": ((0.02, 0.015, 0.005, 0.01, 0.025, 1.0), "0.075"),
    "meco, banks": ((0.02, 0.015, 0.005, 0.02, 0.1, 1.0), "0.160"),
    # Public environmental filing, Sol de Leon, farm channels.
    "leon 1": ((0.025, 0.011, 0.001, 0.002, 0.025, 1.0), "0.064"),
    "leon 2": ((0.025, 0.01, 0.001, 0.002, 0.01, 1.0), "0.048"),
    "leon 3": ((0.025, 0.01, 0.001, 0.005, 0.01, 1.0), "0.051"),
    # Public environmental filing, Halcon 14, table 5.12.
    "halcon 14": ((0.02, 0.008, 0.005, 0.02, 0.005, 1.0), "0.058"),
}

# Printed results that do not follow from the printed factors.
WRONG: dict[str, tuple[Six, str, str]] = {
    # Public environmental filing, Corniglia, earlier study, table 15.
    "corniglia, earlier": ((0.02, 0.01, 0.005, 0.0, 0.015, 1.0), "0.060", "0.050"),
    # Public environmental filing, Leyda, main channels, tables 4-1 and 4-3.
    "leyda": ((0.021, 0.007, 0.003, 0.015, 0.002, 1.0), "0.035", "0.048"),
}

# The source prints the factors and no result; the product is our arithmetic by hand.
WITHOUT_RESULT: dict[str, tuple[Six, float]] = {
    # Methods in Stream Ecology (Hauer and Lamberti), p. 66, second hand: 0.088 x 1.15.
    "stream ecology p. 66": ((0.028, 0.005, 0.01, 0.02, 0.025, 1.15), 0.1012),
    # A student's sheet, public document 631578076: 0.053 x 1.1.
    "student sheet": ((0.028, 0.005, 0.0, 0.005, 0.015, 1.1), 0.0583),
}


def at_printed_decimals(six: Six, printed: str) -> str:
    return rounded(combine(six), len(printed.split(".")[1]))


@pytest.mark.parametrize("name", PRINTED)
def test_printed_n_follows_from_its_factors(name: str) -> None:
    six, printed = PRINTED[name]
    assert at_printed_decimals(six, printed) == printed


@pytest.mark.parametrize("name", WRONG)
def test_printed_slip_is_not_reproduced(name: str) -> None:
    six, printed, ours = WRONG[name]
    assert at_printed_decimals(six, printed) == ours != printed


@pytest.mark.parametrize("name", WITHOUT_RESULT)
def test_example_without_a_result_is_the_product_by_hand(name: str) -> None:
    six, by_hand = WITHOUT_RESULT[name]
    assert combine(six) == pytest.approx(by_hand, abs=1e-12)


@pytest.mark.parametrize(
    ("vegetation", "low", "best", "high"),
    [(point(0.0), 0.037, 0.048, 0.060), (Range(0.025, 0.03, 0.05), 0.062, 0.078, 0.110)],
    ids=["channel", "banks"],
)
def test_ranges_of_cosumnes_river_add_to_the_ranges_of_n(
    vegetation: Range, low: float, best: float, high: float
) -> None:
    # Same notebook: base 0.026-0.035, moderate irregularity 0.006-0.010, minor obstruction
    # 0.005-0.015, large vegetation 0.025-0.050 on the banks; its sums are the expected values.
    six = [
        Range(0.026, 0.03, 0.035),
        Range(0.006, 0.008, 0.010),
        point(0.0),
        Range(0.005, 0.01, 0.015),
        vegetation,
        point(1.0),
    ]
    n = envelope(dict(zip(FACTORS, six, strict=True)))
    assert (n.low, n.best, n.high) == pytest.approx((low, best, high), abs=1e-15)
