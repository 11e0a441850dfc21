"""Killed writers, two writers at once, full disks: what was said to be kept is there."""

import errno
import json
import os
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from roughness.errors import BusyError, NotKeptError
from roughness.trail.locking import SurveyLock
from roughness.trail.naming import reach_trail
from roughness.trail.reading import read_trail
from roughness.trail.writing import Kept, append, begin

AT = "2026-06-03T18:20:00+02:00"
BEGIN = {"format": 1, "survey": "ab" * 16, "reach": "mill weir"}
WRITER = [sys.executable, str(Path(__file__).parent / "writer.py")]
ROOT = Path(__file__).parents[2]

if sys.platform == "win32":
    pytest.skip("these tests fork, kill and mount", allow_module_level=True)


def start(*words: object) -> subprocess.Popen[str]:
    return subprocess.Popen(
        [*WRITER, *map(str, words)],
        stdout=subprocess.PIPE,
        text=True,
        env=os.environ | {"PYTHONPATH": str(ROOT)},
    )


def begun(survey: Path, file: str = "a") -> Path:
    path = reach_trail(survey, file)
    path.parent.mkdir(exist_ok=True)
    begin(path, BEGIN, by="Ann", at=AT, lock=SurveyLock(survey))
    return path


def visit(path: Path, survey: Path, note: str) -> Kept:
    data = {"visit": "spring", "note": note}
    return append(path, "visit", data, by="Ann", at=AT, lock=SurveyLock(survey))


def test_everything_said_to_be_kept_is_there_after_two_hundred_kills(tmp_path: Path) -> None:
    (tmp_path / "reaches").mkdir()
    writer = start("killed", tmp_path, 200, 1)
    report = json.loads(writer.communicate(timeout=120)[0])
    assert report["lost"] == 0
    assert report["broken"] == 0
    # Kills that all came before the first or after the last line would show nothing.
    assert 200 < report["said"] < 200 * 200


def test_two_processes_append_a_hundred_lines_each_without_a_fork(tmp_path: Path) -> None:
    path = begun(tmp_path)
    writers = [start("append", tmp_path, "a", name, 100) for name in ("Ann", "Bo")]
    told = [name for writer in writers for name in writer.communicate(timeout=60)[0].split()]
    trail = read_trail(path)
    assert [writer.returncode for writer in writers] == [0, 0]
    assert trail.intact
    assert len(trail.heads) == 1
    assert len(trail.lines) == 201
    assert set(told) == {line.hash for line in trail.lines[1:]}


def test_a_dead_process_holds_no_lock(tmp_path: Path) -> None:
    path = begun(tmp_path)
    holder = start("hold", tmp_path)
    assert holder.stdout is not None
    assert holder.stdout.readline() == "held\n"
    lock = SurveyLock(tmp_path, wait_s=0.1)
    before = path.read_bytes()
    with pytest.raises(BusyError, match="Bo on "):
        append(path, "visit", {"visit": "x"}, by="Ann", at=AT, lock=lock)
    assert path.read_bytes() == before
    holder.kill()
    holder.communicate()
    assert append(path, "visit", {"visit": "x"}, by="Ann", at=AT, lock=lock).locked


def test_a_write_that_is_taken_in_part_is_taken_back(tmp_path: Path) -> None:
    path = begun(tmp_path)
    # Any limit on the way; the line that meets it is cut short by the system.
    for limit in (3001, 6002, 9003):
        told, refused = start("limited", tmp_path, "a", limit).communicate()[0].rsplit("\n", 2)[:2]
        assert refused.startswith("NotKeptError not kept: reaches/a.jsonl could not be written")
        assert refused.endswith("the file is as it was before")
        trail = read_trail(path)
        assert trail.intact
        assert trail.torn == b""
        assert set(told.split()) <= set(trail.by_hash)
        assert limit - 1500 < path.stat().st_size <= limit
    assert visit(path, tmp_path, "room again").trail.intact


@pytest.fixture
def small_disk(tmp_path: Path) -> Iterator[Path]:
    folder = tmp_path / "small"
    folder.mkdir()
    words = ["mount", "-t", "tmpfs", "-o", "size=256k", "tmpfs", str(folder)]
    try:
        done = subprocess.run(words, capture_output=True, text=True, check=False)
    except FileNotFoundError:
        pytest.skip("there is no mount command")
    if done.returncode:
        pytest.skip(f"a small disk cannot be mounted here: {done.stderr.strip()}")
    yield folder
    subprocess.run(["umount", str(folder)], check=True)


def test_a_full_disk_is_said_and_nothing_is_lost(small_disk: Path) -> None:
    path = begun(small_disk)
    told: list[str] = []
    with pytest.raises(NotKeptError) as refused:
        for number in range(1000):
            told.append(visit(path, small_disk, f"{number} " + "x" * 700).line.hash)
    assert str(refused.value).startswith("not kept: reaches/a.jsonl could not be written (No space")
    assert "\n" not in str(refused.value)
    trail = read_trail(path)
    assert trail.intact
    assert trail.torn == b""
    assert [line.hash for line in trail.lines[1:]] == told
    assert len(told) > 100


def test_a_full_disk_keeps_a_torn_tail_until_there_is_room(small_disk: Path) -> None:
    path = begun(small_disk)
    path.write_bytes(path.read_bytes() + b'{"torn')
    before = path.read_bytes()
    ballast = small_disk / "ballast"
    fill(ballast)
    with pytest.raises(NotKeptError, match="No space"):
        visit(path, small_disk, "x")
    assert path.read_bytes() == before
    ballast.unlink()
    assert visit(path, small_disk, "x").repaired == b'{"torn'


def test_a_full_disk_leaves_no_half_begun_trail(small_disk: Path) -> None:
    begun(small_disk)
    fill(small_disk / "ballast")
    with pytest.raises(NotKeptError, match=r"reaches/b\.jsonl"):
        begun(small_disk, "b")
    assert not reach_trail(small_disk, "b").exists()


def fill(ballast: Path) -> None:
    with ballast.open("wb", buffering=0) as file:
        for size in (4096, 1):
            try:
                while True:
                    file.write(b"x" * size)
            except OSError:
                continue


def test_a_demo_that_the_disk_does_not_take_says_why_and_leaves_nothing(tmp_path: Path) -> None:
    code = (
        "import resource, sys; from roughness.__main__ import main;"
        "resource.setrlimit(resource.RLIMIT_FSIZE, (8192, 8192));"
        "sys.exit(main(['demo', sys.argv[1]]))"
    )
    run = subprocess.run(
        [sys.executable, "-c", code, str(tmp_path / "demo")],
        capture_output=True,
        text=True,
        check=False,
        stdin=subprocess.DEVNULL,
        env=os.environ | {"PYTHONPATH": str(ROOT)},
    )
    assert run.returncode == 2 and "File too large" in run.stderr
    assert "nothing was made" in run.stderr and list(tmp_path.iterdir()) == []


def test_a_line_and_a_new_file_are_on_the_disk_before_they_are_said_to_be_kept(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    synced: list[tuple[int, int]] = []
    sync = os.fsync

    def seen(handle: int) -> None:
        sync(handle)
        synced.append((os.fstat(handle).st_ino, os.fstat(handle).st_size))

    monkeypatch.setattr(os, "fsync", seen)
    path = begun(tmp_path)
    assert path.parent.stat().st_ino in [inode for inode, _ in synced]
    for note in ("first", "second"):
        visit(path, tmp_path, note)
        assert (path.stat().st_ino, path.stat().st_size) in synced


def test_a_line_that_the_disk_did_not_confirm_is_not_kept_and_said(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = begun(tmp_path)
    before, sync, calls = path.read_bytes(), os.fsync, []

    def failing_once(handle: int) -> None:
        calls.append(handle)
        if len(calls) == 1:
            raise OSError(errno.EIO, os.strerror(errno.EIO))
        sync(handle)

    monkeypatch.setattr(os, "fsync", failing_once)
    with pytest.raises(NotKeptError, match="as it was before"):
        visit(path, tmp_path, "lost")
    assert path.read_bytes() == before
    visit(path, tmp_path, "kept")
    assert b"kept" in path.read_bytes() and b"lost" not in path.read_bytes()
