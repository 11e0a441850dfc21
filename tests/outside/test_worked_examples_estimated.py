"""Published estimates taken the whole way: grades chosen, values given, n to the published digits.

Sources stand beside each case. Where the publication chose a value outside its own table,
the tool must ask (or stop); where its figures contradict each other, the tool must not
agree. Public environmental filings are practice documents, not authorities: only figures
were taken from them (seen).
"""

from typing import Any

import pytest

from roughness import estimate
from roughness.quantities.printing import rounded

FACTORS = ("base", "irregularity", "variation", "obstruction", "vegetation", "meander")
SHORT = {
    "occasionally": "alternating-occasionally",
    "frequently": "alternating-frequently",
}
NOTE = "value as printed in the source"


def judged(handbook: str, grades: str, values: tuple[float, ...]) -> dict[str, Any]:
    """Grades as chosen in the source, with the values that it printed."""
    keys = [SHORT.get(word, word) for word in grades.split()]
    choices = zip(FACTORS, keys, values, strict=True)
    return {
        "handbook": handbook,
        "setting": "channel",
        "factors": {f: {"grade": g, "best": v, "note": NOTE} for f, g, v in choices},
    }


# id, handbook, grades, printed values (base, n1, n2, n3, n4, m), printed n
CASES = [
    # SCS National Engineering Handbook 5, supplement B (Cowan 1956), p. B.7, Camp Creek near
    # Seymour, Illinois; description seen, factor values and result from memory.
    ("Camp Creek", "scs-1963", "earth moderate gradual negligible very-high minor",
     (0.02, 0.01, 0.0, 0.0, 0.08, 1.0), "0.11"),
    # Cosumnes River at Michigan Bar, public research notebook, channel (seen); it prints 0.08
    # for 0.008, and its result holds for 0.008.
    ("Cosumnes channel", "usgs-wsp-2339", "gravel moderate gradual minor none minor",
     (0.03, 0.008, 0.0, 0.01, 0.0, 1.0), "0.048"),
    ("Cosumnes banks", "usgs-wsp-2339", "gravel moderate gradual minor large minor",
     (0.03, 0.008, 0.0, 0.01, 0.03, 1.0), "0.078"),
    # Public environmental filings, Chile (seen); the reach names are theirs.
    ("Coloane", "cowan-1956", "earth minor occasionally negligible low appreciable",
     (0.02, 0.005, 0.005, 0.0, 0.005, 1.15), "0.040"),
    ("Arena, creek C1", "cowan-1956", "earth smooth gradual negligible low minor",
     (0.02, 0.0, 0.0, 0.0, 0.005, 1.0), "0.025"),
    ("Zaldivar LAT_14", "cowan-1956", "earth minor frequently minor low minor",
     (0.02, 0.005, 0.01, 0.01, 0.0, 1.0), "0.045"),
    ("Corniglia A", "cowan-1956", "earth smooth gradual minor low minor",
     (0.02, 0.0, 0.0, 0.01, 0.008, 1.0), "0.038"),
    ("Corniglia B", "cowan-1956", "earth smooth gradual minor medium minor",
     (0.02, 0.0, 0.0, 0.01, 0.018, 1.0), "0.048"),
    ("Llanos de Rungue C_04", "cowan-1956", "earth minor gradual minor medium minor",
     (0.02, 0.005, 0.0, 0.015, 0.012, 1.0), "0.052"),
    ("Amantible", "cowan-1956", "fine-gravel minor gradual negligible medium minor",
     (0.024, 0.005, 0.0, 0.005, 0.01, 1.0), "0.044"),
    ("San Ramon", "cowan-1956", "coarse-gravel moderate gradual minor none appreciable",
     (0.028, 0.01, 0.0, 0.01, 0.0, 1.0), "0.048"),
    ("El Sauce 1", "cowan-1956", "earth minor occasionally negligible low minor",
     (0.02, 0.005, 0.005, 0.0, 0.005, 1.0), "0.035"),
    ("El Sauce 4", "cowan-1956", "fine-gravel minor occasionally negligible low minor",
     (0.024, 0.005, 0.005, 0.0, 0.005, 1.0), "0.039"),
    ("El Sauce 5", "cowan-1956", "coarse-gravel minor occasionally negligible low minor",
     (0.028, 0.005, 0.005, 0.0, 0.005, 1.0), "0.043"),
    ("El Sauce 10", "cowan-1956", "coarse-gravel minor occasionally minor medium minor",
     (0.028, 0.005, 0.005, 0.012, 0.025, 1.0), "0.075"),
    ("Estero Meco, channel", "usgs-wsp-2339", "firm-soil severe occasionally minor medium minor",
     (0.02, 0.015, 0.005, 0.01, 0.025, 1.0), "0.075"),
    ("Estero Meco, banks", "usgs-wsp-2339",
     "firm-soil severe occasionally appreciable very-large minor",
     (0.02, 0.015, 0.005, 0.02, 0.1, 1.0), "0.16"),
    ("Sol de Leon 1", "usgs-wsp-2339", "firm-soil severe occasionally negligible medium minor",
     (0.025, 0.011, 0.001, 0.002, 0.025, 1.0), "0.064"),
    ("Sol de Leon 2", "usgs-wsp-2339", "firm-soil moderate occasionally negligible small minor",
     (0.025, 0.01, 0.001, 0.002, 0.01, 1.0), "0.048"),
    ("Sol de Leon 3", "usgs-wsp-2339", "firm-soil moderate occasionally minor small minor",
     (0.025, 0.01, 0.001, 0.005, 0.01, 1.0), "0.051"),
    ("Halcon 14", "usgs-wsp-2339", "firm-soil moderate occasionally appreciable small minor",
     (0.02, 0.008, 0.005, 0.02, 0.005, 1.0), "0.058"),
]  # fmt: skip


@pytest.mark.parametrize(
    ("handbook", "grades", "values", "printed"), [c[1:] for c in CASES], ids=[c[0] for c in CASES]
)
def test_a_published_estimate_comes_out_to_the_published_digits(
    handbook: str, grades: str, values: tuple[float, ...], printed: str
) -> None:
    result = estimate(judged(handbook, grades, values))
    assert rounded(result.n.best, len(printed.partition(".")[2])) == printed


def test_values_outside_the_table_they_cite_are_asked_about() -> None:
    """Zaldivar grades low vegetation at 0, San Ramon appreciable bends at 1, Amantible 0.005."""
    asked = {}
    for name, handbook, grades, values, _ in CASES:
        found = estimate(judged(handbook, grades, values)).findings
        asked[name] = {f.factor for f in found if f.rule == "outside-published-range-noted"}
    assert asked["Zaldivar LAT_14"] == {"vegetation"}
    assert asked["San Ramon"] == {"meander"}
    assert asked["Amantible"] == {"obstruction"}
    assert asked["Corniglia A"] == asked["El Sauce 5"] == asked["Arena, creek C1"] == set()


@pytest.mark.parametrize(
    ("name", "grades", "values", "printed"),
    [
        # Public environmental filings whose printed n does not follow from their own terms (seen).
        ("Corniglia, earlier", "earth moderate occasionally negligible medium minor",
         (0.02, 0.01, 0.005, 0.0, 0.015, 1.0), "0.060"),
        ("Leyda", "earth moderate occasionally minor low minor",
         (0.021, 0.007, 0.003, 0.015, 0.002, 1.0), "0.035"),
    ],
)  # fmt: skip
def test_a_printed_n_that_does_not_follow_from_its_terms_does_not_come_out(
    name: str, grades: str, values: tuple[float, ...], printed: str
) -> None:
    assert rounded(estimate(judged("cowan-1956", grades, values)).n.best, 3) != printed


def test_the_range_of_a_published_estimate_comes_from_its_own_ranges() -> None:
    """Cosumnes notebook: base 0.026-0.035, n1 0.006-0.010, n3 0.005-0.015: 0.037 to 0.060."""
    document = judged("usgs-wsp-2339", *CASES[1][2:4])
    document["factors"]["base"] |= {"low": 0.026, "high": 0.035}
    n = estimate(document).n
    assert (rounded(n.low, 3), rounded(n.best, 3), rounded(n.high, 3)) == (
        "0.037",
        "0.048",
        "0.060",
    )


def test_the_additive_form_of_the_meander_step_is_the_same_n() -> None:
    """A form after a North Carolina manual adds the share of n_s (Colorado DRMS file, seen)."""
    straight = estimate(judged("scs-1963", CASES[0][2], CASES[0][3])).n.best
    bends = CASES[0][2].replace("very-high minor", "very-high severe")
    document = judged("scs-1963", bends, CASES[0][3])
    del document["factors"]["meander"]["best"]
    assert estimate(document).n.best == pytest.approx(straight + 0.30 * straight)
