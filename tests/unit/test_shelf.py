"""Handbooks by key: whose file counts, and what is said when none does."""

import hashlib
import os
import shutil
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

import roughness
from roughness import load_handbook
from roughness.errors import HandbookError, InputError, UnknownNameError
from roughness.shelf.editions import shipped_editions
from roughness.shelf.handbooks import handbook_for, handbook_keys, unusable_handbooks
from roughness.shelf.places import tables_folder

SHIPPED = ("cowan-1956", "scs-1963", "usgs-wsp-2339")


def shipped_text(key: str) -> str:
    return (tables_folder() / f"{key}.toml").read_text(encoding="utf-8")


def agency_text(key: str = "our-agency-2024") -> str:
    return shipped_text("cowan-1956").replace('"cowan-1956"', f'"{key}"')


def put(folder: Path, name: str, text: str) -> Path:
    path = folder / name
    path.write_bytes(text.encode())
    return path


@pytest.mark.parametrize("key", SHIPPED)
def test_a_shipped_handbook_is_loaded_by_its_key(key: str) -> None:
    assert load_handbook(key).key == key


@pytest.mark.parametrize("key", SHIPPED)
def test_todays_tables_are_in_the_list_of_shipped_editions(key: str) -> None:
    raw = (tables_folder() / f"{key}.toml").read_bytes().replace(b"\r\n", b"\n")
    assert hashlib.sha256(raw).hexdigest() in shipped_editions()[key]


def test_the_list_of_editions_names_no_handbook_that_is_not_shipped() -> None:
    assert tuple(sorted(shipped_editions())) == SHIPPED


def test_an_unknown_key_names_the_nearest_and_the_known_ones(tmp_path: Path) -> None:
    put(tmp_path, "a.toml", agency_text())
    with pytest.raises(UnknownNameError, match="did you mean 'our-agency-2024'") as refused:
        load_handbook("our-agency-2042", tmp_path)
    for key in SHIPPED:
        assert key in str(refused.value)


@pytest.mark.parametrize("key", ["", "../cowan-1956", "cowan-1956.toml", "a\x1b[2J", "/etc/passwd"])
def test_a_key_is_never_a_path(key: str) -> None:
    with pytest.raises(UnknownNameError) as refused:
        load_handbook(key)
    assert "\x1b" not in str(refused.value)


def test_an_agencys_file_counts_without_code_and_whatever_its_name(tmp_path: Path) -> None:
    put(tmp_path, "Rauheiten (neu).toml", agency_text().replace("value = 0.020", "value = 0.021"))
    handbook = load_handbook("our-agency-2024", tmp_path)
    assert handbook.grade("channel", "base", "earth").low == 0.021
    assert handbook_keys(tmp_path) == (*SHIPPED, "our-agency-2024")


def test_a_folder_that_is_not_there_is_an_empty_one(tmp_path: Path) -> None:
    assert handbook_keys(tmp_path / "handbooks") == SHIPPED
    assert load_handbook("scs-1963", tmp_path / "handbooks").key == "scs-1963"


def test_a_changed_file_under_a_shipped_key_is_refused(tmp_path: Path) -> None:
    put(tmp_path, "mine.toml", shipped_text("cowan-1956").replace("value = 0.020", "value = 0.03"))
    with pytest.raises(HandbookError, match=r"mine\.toml: .*no shipped edition.*key of its own"):
        load_handbook("cowan-1956", tmp_path)
    assert load_handbook("cowan-1956").grade("channel", "base", "earth").low == 0.020


def test_a_surveys_copy_of_an_older_edition_wins_over_the_newer_shipped_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    older = shipped_text("cowan-1956").replace("value = 0.020", "value = 0.019")
    put(tmp_path, "cowan-1956.toml", older)
    sha256 = hashlib.sha256(older.encode()).hexdigest()
    known = {**shipped_editions(), "cowan-1956": shipped_editions()["cowan-1956"] | {sha256}}
    monkeypatch.setattr("roughness.shelf.handbooks.shipped_editions", lambda: known)
    handbook = load_handbook("cowan-1956", tmp_path)
    assert handbook.sha256 == sha256
    assert handbook.grade("channel", "base", "earth").low == 0.019


def test_a_copy_with_other_line_ends_is_the_same_edition(tmp_path: Path) -> None:
    put(tmp_path, "cowan-1956.toml", shipped_text("cowan-1956").replace("\n", "\r\n"))
    assert load_handbook("cowan-1956", tmp_path).sha256 == load_handbook("cowan-1956").sha256


def test_two_files_with_one_key_are_refused_by_name(tmp_path: Path) -> None:
    put(tmp_path, "a.toml", agency_text())
    put(tmp_path, "b.toml", agency_text() + "# another\n")
    with pytest.raises(HandbookError, match=r"b\.toml: the key 'our-agency-2024'.*/a\.toml"):
        load_handbook("our-agency-2024", tmp_path)


def test_a_broken_file_beside_it_hides_no_other_handbook(tmp_path: Path) -> None:
    put(tmp_path, "a.toml", "key = ")
    put(tmp_path, "b.toml", agency_text())
    assert load_handbook("our-agency-2024", tmp_path).key == "our-agency-2024"
    with pytest.raises(UnknownNameError, match=r"a file was not read .*a\.toml: line 1"):
        load_handbook("their-tables", tmp_path)


def test_every_unusable_file_of_a_folder_is_told(tmp_path: Path) -> None:
    put(tmp_path, "a.toml", "key = ")
    put(tmp_path, "b.toml", agency_text().replace("value = 0.020", "value = -1.0"))
    put(tmp_path, "c.toml", shipped_text("scs-1963") + "# changed\n")
    put(tmp_path, "d.toml", agency_text("sound"))
    put(tmp_path, "e.toml", "#" * ((1 << 20) + 1))
    put(tmp_path, "f.toml", 'title = "without a key"\n')
    told = [str(fault) for fault in unusable_handbooks(tmp_path)]
    assert [text.partition(":")[0] for text in told] == [
        f"{tmp_path.name}/{name}.toml" for name in ("a", "b", "c", "e", "f")
    ]


def test_a_folder_and_a_hidden_file_are_passed_over(tmp_path: Path) -> None:
    (tmp_path / "old.toml").mkdir()
    put(tmp_path, "._a.toml", "not toml")
    assert unusable_handbooks(tmp_path) == ()


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="no named pipes here")
def test_a_named_pipe_is_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.toml")
    assert handbook_keys(tmp_path) == SHIPPED


def test_a_link_out_of_the_folder_is_not_followed(tmp_path: Path) -> None:
    folder = tmp_path / "handbooks"
    folder.mkdir()
    (folder / "a.toml").symlink_to(put(tmp_path, "outside.toml", agency_text()))
    assert handbook_keys(folder) == SHIPPED
    with pytest.raises(UnknownNameError, match="a link that leads out of the folder"):
        load_handbook("our-agency-2024", folder)


def test_a_file_is_parsed_once_until_it_changes(tmp_path: Path) -> None:
    path = put(tmp_path, "a.toml", agency_text())
    first = load_handbook("our-agency-2024", tmp_path)
    assert load_handbook("our-agency-2024", tmp_path) is first
    put(tmp_path, "a.toml", agency_text().replace("value = 0.020", "value = 0.022"))
    os.utime(path, ns=(1, 1))
    assert load_handbook("our-agency-2024", tmp_path).grade("channel", "base", "earth").low == 0.022


def test_a_handbook_without_flood_plains_hands_them_over() -> None:
    for key in ("cowan-1956", "scs-1963"):
        plain, handed_over = handbook_for(key, "flood-plain")
        assert (plain.key, handed_over) == ("usgs-wsp-2339", True)
        channel, handed_over = handbook_for(key, "channel")
        assert (channel.key, handed_over) == (key, False)
    plain, handed_over = handbook_for("usgs-wsp-2339", "flood-plain")
    assert (plain.key, handed_over) == ("usgs-wsp-2339", False)


HANDS_OVER = 'flood_plains_from = "usgs-wsp-2339"'


@pytest.mark.parametrize(
    ("instead", "names"),
    [
        ("", "our-agency-2024 has no flood-plain table"),
        (HANDS_OVER.replace("usgs-wsp-2339", "scs-1963"), "neither has scs-1963"),
        (HANDS_OVER.replace("usgs-wsp-2339", "our-agency-2024"), "neither has our-agency-2024"),
        (HANDS_OVER.replace("usgs-wsp-2339", "usgs-wsp-2393"), "did you mean 'usgs-wsp-2339'"),
    ],
)
def test_flood_plains_that_nobody_treats_are_refused(
    tmp_path: Path, instead: str, names: str
) -> None:
    put(tmp_path, "a.toml", agency_text().replace(HANDS_OVER, instead))
    with pytest.raises(InputError, match=names):
        handbook_for("our-agency-2024", "flood-plain", tmp_path)


TOP = Path(roughness.__file__).parents[1]
ASK = """
from roughness import load_handbook
from roughness.shelf.places import demo_folder, tables_folder
print(tables_folder())
print(demo_folder())
from roughness.desk.measured_streams import measured_streams
print(*(stream.key for stream in measured_streams().streams))
from roughness.desk.cross_checking import channel_types
print(len(channel_types().rows))
print(*(load_handbook(key).sha256 for key in ("cowan-1956", "scs-1963", "usgs-wsp-2339")))
"""


def answer(path: Path, cwd: Path) -> list[str]:
    done = subprocess.run(
        [sys.executable, "-c", ASK],
        cwd=cwd,
        env={**os.environ, "PYTHONPATH": str(path)},
        capture_output=True,
        text=True,
        check=True,
        timeout=30,
    )
    return done.stdout.splitlines()


@pytest.mark.skipif(
    not all(
        (TOP / name).exists()
        for name in ("pyproject.toml", "README.md", "demo_reaches/survey.jsonl")
    ),
    reason="not a whole checkout",
)
def test_a_wheel_and_a_checkout_hold_the_same_tables_and_the_demo_survey(tmp_path: Path) -> None:
    pytest.importorskip("hatchling")
    subprocess.run(
        [sys.executable, "-m", "hatchling", "build", "-t", "wheel", "-d", str(tmp_path)],
        cwd=TOP,
        capture_output=True,
        check=True,
        timeout=60,
    )
    installed = tmp_path / "installed"
    with zipfile.ZipFile(next(tmp_path.glob("*.whl"))) as wheel:
        wheel.extractall(installed)
    from_wheel, from_checkout = answer(installed, tmp_path), answer(TOP, tmp_path)
    shelf = installed / "roughness" / "shelf"
    assert from_wheel[:2] == [str(shelf / "tables"), str(shelf / "demo_reaches")]
    assert from_checkout[:2] == [str(TOP / "tables"), str(TOP / "demo_reaches")]
    assert "rock-creek-darby" in from_wheel[2]
    assert from_wheel[2:] == from_checkout[2:]


def test_an_incomplete_installation_is_said_with_the_folder_that_is_missing(
    tmp_path: Path,
) -> None:
    package = tmp_path / "roughness"
    shutil.copytree(
        TOP / "roughness",
        package,
        ignore=shutil.ignore_patterns("__pycache__", "tables", "demo_reaches"),
    )
    done = subprocess.run(
        [sys.executable, "-c", ASK],
        cwd=tmp_path,
        env={**os.environ, "PYTHONPATH": str(tmp_path)},
        capture_output=True,
        text=True,
        check=False,
        timeout=30,
    )
    assert "RoughnessError: the folder tables that belongs to the program is missing" in done.stderr
