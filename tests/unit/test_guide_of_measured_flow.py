"""The guide's page on measured flow holds what it says."""

import json
import re
from pathlib import Path

import pytest

import roughness
from roughness.__main__ import main
from roughness.comparison.blending import SIGMA_OF_ONE_ANALOGUE
from roughness.desk.measured_streams import measured_streams
from roughness.hydraulics.back_calculation import back_calculate, n_of_uniform_flow, relative_sd

PAGE = (Path(roughness.__file__).parent / "guide" / "measured-flow.md").read_text("utf-8")


def test_its_example_runs(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    example = re.search(r"```json\n(.*?)```", PAGE, re.DOTALL)
    assert example is not None
    file = tmp_path / "flow.json"
    file.write_text(example[1], encoding="utf-8")
    assert main(["backcalc", str(file)]) == 0
    found = json.loads(capsys.readouterr().out)
    assert 0.03 < found["n"] < 0.04 and found["sd"] > 0


def test_its_counts_of_streams_are_those_of_the_catalogue() -> None:
    streams = measured_streams().streams
    bare = [s for s in streams if not s.bed and all(e.depth_m is None for e in s.events)]
    assert f"Of {len(bare)} of the {len(streams)} streams n alone" in " ".join(PAGE.split())


def test_its_figures_are_those_of_the_program() -> None:
    found = back_calculate(
        30.0,
        [0.0, 50.0, 90.0, 150.0],
        [24.3347749464155, 18.740480469306, 28.9435695129766, 23.4],
        [17.4763964209165, 14.4073600853284, 19.6179461891221, 16.6],
        [102.038198210458, 101.903680042664, 101.888973094561, 101.8],
    )
    by_flow = float(relative_sd(found.whole, discharge=1.0))
    by_area = float(relative_sd(found.whole, area=1.0))
    assert f"-{by_flow:.2f} and {by_area:.2f}" in PAGE
    assert f"{SIGMA_OF_ONE_ANALOGUE:.2f} in ln n" in PAGE
    foot = 0.3048
    area = 48566.7 * foot**2
    n = float(n_of_uniform_flow(406308.8 * foot**3, area, area / (27.94 * foot), 0.000194))
    assert f"{n:.4f}, {(1 - n / 0.024) * 100:.0f} % less" in PAGE
