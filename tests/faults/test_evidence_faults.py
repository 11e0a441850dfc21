"""Files that mean harm, disks that are full, files that change under the hand."""

import os
import random
import socket
import struct
import subprocess
import sys
import threading
import time
import zlib
from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
from contextlib import contextmanager
from pathlib import Path

import pytest
from PIL import Image

from roughness.errors import InputError, NotKeptError, RecordError
from roughness.evidence.holding import held
from roughness.evidence.keeping import keep_copy
from roughness.evidence.metadata import read_metadata
from roughness.evidence.pictures import half_blocks, thumbnail
from roughness.evidence.sources import LARGEST_BYTES, opened_source

ROOT = Path(__file__).parents[2]

if sys.platform == "win32":
    pytest.skip("these tests make pipes, links and limits", allow_module_level=True)


@pytest.fixture
def survey(tmp_path: Path) -> Path:
    folder = tmp_path / "survey"
    folder.mkdir()
    return folder


def files(folder: Path) -> list[str]:
    return sorted(str(p.relative_to(folder)) for p in folder.rglob("*") if not p.is_dir())


def picture(path: Path, size: tuple[int, int] = (300, 200)) -> Path:
    noise = random.Random(7).randbytes(size[0] * size[1] * 3)
    Image.frombytes("RGB", size, noise).save(path)
    return path


def refused(survey: Path, source: Path) -> str:
    """Try to keep a file; return the sentence and see that nothing was written."""
    with pytest.raises(InputError) as caught:
        keep_copy(survey, source)
    assert files(survey) == []
    sentence = str(caught.value)
    assert "\n" not in sentence
    return sentence


def bytes_read() -> int:
    """Return how many bytes this process has read so far, where the system tells."""
    told = Path("/proc/self/io")
    return int(told.read_text().split()[1]) if told.exists() else 0


# -- what is not a plain file -----------------------------------------------------------


def test_a_link_is_not_followed_and_says_what_to_do(survey: Path, tmp_path: Path) -> None:
    (tmp_path / "secret.txt").write_text("s")
    link = tmp_path / "weir.txt"
    link.symlink_to(tmp_path / "secret.txt")
    assert refused(survey, link) == (
        "weir.txt: it is a link, not a file; name the file that it leads to"
    )
    (tmp_path / "dangling.txt").symlink_to(tmp_path / "nowhere")
    assert "a link" in refused(survey, tmp_path / "dangling.txt")


def test_folders_pipes_sockets_and_devices_are_refused_at_once(
    survey: Path, tmp_path: Path
) -> None:
    (tmp_path / "folder.jpg").mkdir()
    os.mkfifo(tmp_path / "pipe.jpg")  # opening it would wait for a writer for ever
    with socket.socket(socket.AF_UNIX) as open_socket:
        open_socket.bind(str(tmp_path / "s.jpg"))
        assert "a socket" in refused(survey, tmp_path / "s.jpg")
    assert "a folder" in refused(survey, tmp_path / "folder.jpg")
    assert "a pipe" in refused(survey, tmp_path / "pipe.jpg")
    with (
        pytest.raises(InputError, match="it is a device, not a file"),
        opened_source(Path("/dev/zero")),
    ):
        pass


def test_a_missing_an_empty_and_an_unreadable_file_are_named(survey: Path, tmp_path: Path) -> None:
    assert "no such file" in refused(survey, tmp_path / "not there.jpg")
    (tmp_path / "empty.jpg").touch()
    assert "the file is empty" in refused(survey, tmp_path / "empty.jpg")
    assert "cannot be read" in refused(survey, Path("a\0b.jpg"))
    assert "cannot be read" in refused(survey, tmp_path / "empty.jpg" / "b.jpg")


@pytest.mark.skipif(os.geteuid() == 0, reason="the superuser may read everything")
def test_a_file_that_may_not_be_read_is_named(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "locked.jpg"
    path.write_text("x")
    path.chmod(0)
    assert "cannot be read (permission denied)" in refused(survey, path)


def test_four_gigabytes_are_refused_by_their_size_before_anything_is_read(
    survey: Path, tmp_path: Path
) -> None:
    path = tmp_path / "film.mp4"
    with path.open("wb") as file:
        file.truncate(4_000_000_000)
    before = bytes_read()
    assert refused(survey, path) == (
        "film.mp4: the file has 4 000 MB; at most 200 MB; keep a smaller copy as evidence"
    )
    assert bytes_read() - before < 10_000


def test_the_largest_file_is_taken_and_one_byte_more_is_not(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "a.txt"
    path.write_bytes(b"x" * 1001)
    with pytest.raises(InputError, match="at most"):
        keep_copy(survey, path, largest=1000)
    assert keep_copy(survey, path, largest=1001).size == 1001
    assert LARGEST_BYTES == 200_000_000


@pytest.mark.parametrize("name", ["a.html", "a.svg", "a.exe", "a.sh", "a.zip", "a", ".jpg", "a.js"])
def test_files_that_do_more_than_be_looked_at_are_not_taken(
    survey: Path, tmp_path: Path, name: str
) -> None:
    (tmp_path / name).write_text("<svg onload='alert(1)'/>")
    assert "not taken as evidence" in refused(survey, tmp_path / name)


def test_an_evidence_folder_that_is_a_link_or_a_file_is_not_written_to(
    survey: Path, tmp_path: Path
) -> None:
    source = tmp_path / "a.txt"
    source.write_text("a")
    elsewhere = tmp_path / "elsewhere"
    elsewhere.mkdir()
    (survey / "evidence").symlink_to(elsewhere)
    with pytest.raises(RecordError, match="evidence is a link"):
        keep_copy(survey, source)
    assert files(elsewhere) == []
    (survey / "evidence").unlink()
    (survey / "evidence").write_text("not a folder")
    with pytest.raises(RecordError, match="evidence cannot be made"):
        keep_copy(survey, source)


def test_evidence_that_became_a_link_is_changed_even_with_the_same_bytes(
    survey: Path, tmp_path: Path
) -> None:
    source = tmp_path / "a.txt"
    source.write_text("a")
    kept = keep_copy(survey, source)
    (survey / kept.file).unlink()
    (survey / kept.file).symlink_to(source)
    assert held(survey, kept.file, kept.sha256, kept.size) == "changed"


def test_other_bytes_under_a_kept_name_are_never_written_over(survey: Path, tmp_path: Path) -> None:
    source = tmp_path / "a.txt"
    source.write_text("mine")
    kept = keep_copy(survey, source)
    (survey / kept.file).write_text("somebody's")
    with pytest.raises(RecordError, match="with other bytes than its name says"):
        keep_copy(survey, source)
    assert (survey / kept.file).read_text() == "somebody's"
    assert files(survey) == [kept.file]


# -- what changes or breaks meanwhile ---------------------------------------------------


@contextmanager
def somebody_writes(path: Path) -> Iterator[None]:
    """Append to a file all the time until the body is done."""
    stop = threading.Event()

    def write() -> None:
        while not stop.is_set():
            with path.open("ab") as file:
                file.write(b"more")
            time.sleep(0.001)

    writer = threading.Thread(target=write)
    writer.start()
    try:
        yield
    finally:
        stop.set()
        writer.join()


def test_a_file_that_is_written_to_meanwhile_is_refused(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    path.write_bytes(bytes(60_000_000))
    with somebody_writes(path):
        sentence = refused(survey, path)
    assert "changed while it was read" in sentence


def test_two_who_keep_the_same_photo_at_once_keep_one_file(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    for attempt in range(30):
        path.write_bytes(b"%d" % attempt * 1000)
        at_once = threading.Barrier(4)

        def keep(at_once: threading.Barrier = at_once) -> str:
            at_once.wait()
            return keep_copy(survey, path).file

        with ThreadPoolExecutor(4) as people:
            kept = {one.result() for one in [people.submit(keep) for _ in range(4)]}
        assert len(kept) == 1
    assert len(files(survey)) == 30


def test_on_a_full_disk_nothing_is_kept_and_it_is_said(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    path.write_bytes(bytes(3_000_000))
    code = (
        "import resource, signal, sys; from pathlib import Path\n"
        "from roughness.evidence.keeping import keep_copy\n"
        "signal.signal(signal.SIGXFSZ, signal.SIG_IGN)\n"
        "resource.setrlimit(resource.RLIMIT_FSIZE, (2_000_000, 2_000_000))\n"
        "try: keep_copy(Path(sys.argv[1]), Path(sys.argv[2]))\n"
        "except Exception as error: print(type(error).__name__, error)\n"
    )
    run = subprocess.run(
        [sys.executable, "-c", code, survey, path],
        capture_output=True,
        text=True,
        check=True,
        cwd=ROOT,
    )
    assert run.stdout.startswith(f"{NotKeptError.__name__} not kept: a.csv could not be copied")
    assert files(survey) == []


def test_a_copy_that_is_killed_leaves_no_file_that_looks_kept(survey: Path, tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    path.write_bytes(random.Random(1).randbytes(30_000_000))
    code = (
        "import sys; from pathlib import Path\n"
        "from roughness.evidence.keeping import keep_copy\n"
        "print('ready', flush=True)\n"
        "print(keep_copy(Path(sys.argv[1]), Path(sys.argv[2])).file)\n"
    )
    kills_before = 0
    for hundredth in range(1000):
        run = subprocess.Popen(
            [sys.executable, "-c", code, survey, path],
            stdout=subprocess.PIPE,
            text=True,
            cwd=ROOT,
        )
        assert run.stdout is not None
        run.stdout.readline()
        time.sleep(hundredth * 0.01)
        run.kill()
        run.communicate()
        whole = [p for p in (survey / "evidence").glob("*") if not p.name.startswith(".")]
        if whole:
            break
        kills_before += 1
    assert kills_before, "no kill came before the copy was there"
    assert [p.read_bytes() for p in whole] == [path.read_bytes()]


# -- pictures that mean harm ------------------------------------------------------------


def png(width: int, height: int, body: bytes) -> bytes:
    """Lay out a grey PNG (ISO/IEC 15948: signature, then length, type, data, CRC-32)."""

    def chunk(kind: bytes, data: bytes) -> bytes:
        return (
            struct.pack(">I", len(data)) + kind + data + struct.pack(">I", zlib.crc32(kind + data))
        )

    head = struct.pack(">IIBBBBB", width, height, 8, 0, 0, 0, 0)
    return b"\x89PNG\r\n\x1a\n" + chunk(b"IHDR", head) + chunk(b"IDAT", body) + chunk(b"IEND", b"")


def memory_of(code: str, path: Path) -> tuple[int, str]:
    """Run code on a path in its own process; return its greatest memory in bytes, and output."""
    run = subprocess.run(
        [sys.executable, "-c", code, path], capture_output=True, text=True, check=True, cwd=ROOT
    )
    peak, said = run.stdout.split(" ", 1)
    return int(peak) * (1 if sys.platform == "darwin" else 1024), said


SHOW = """
import resource, sys; from pathlib import Path
from roughness.evidence.metadata import read_metadata
from roughness.evidence.pictures import thumbnail
said = 'nothing was asked'
for _ in range({times}):
    try: said = {ask}(Path(sys.argv[1])).width
    except Exception as error: said = f'{{type(error).__name__}} {{error}}'
print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss, said)
"""


def test_an_image_bomb_is_never_unfolded(tmp_path: Path) -> None:
    side = 30_000
    bomb = tmp_path / "bomb.png"
    bomb.write_bytes(png(side, side, zlib.compress(bytes((side + 1) * 1000), 9)))
    assert bomb.stat().st_size < 60_000
    idle, _ = memory_of(SHOW.format(ask="thumbnail", times=0), bomb)
    peak, said = memory_of(SHOW.format(ask="thumbnail", times=1), bomb)
    assert said.strip() == (
        "InputError bomb.png: the picture has far too many pixels; at most 400 million"
    )
    assert peak - idle < 30_000_000 < side * side


@pytest.mark.parametrize(("width", "height"), [(7_072, 7_072), (100_000, 1_000), (1, 60_000_000)])
def test_a_picture_just_beyond_the_limit_is_refused(
    tmp_path: Path, width: int, height: int
) -> None:
    path = tmp_path / "a.png"
    path.write_bytes(png(width, height, zlib.compress(b"")))
    with pytest.raises(InputError, match="million pixels and is not shown"):
        thumbnail(path)


def test_a_photo_of_two_hundred_million_pixels_may_be_kept_but_is_not_unfolded(
    tmp_path: Path,
) -> None:
    path = tmp_path / "a.png"
    path.write_bytes(png(16_320, 12_240, zlib.compress(b"")))
    told = read_metadata(path)
    assert told is not None
    assert (told.width, told.height) == (16_320, 12_240)
    idle, _ = memory_of(SHOW.format(ask="thumbnail", times=0), path)
    peak, said = memory_of(SHOW.format(ask="read_metadata", times=1), path)
    assert said == "16320\n"
    assert peak - idle < 30_000_000
    with pytest.raises(InputError, match=r"199\.8 million pixels and is not shown"):
        thumbnail(path)


def test_a_webp_of_the_largest_canvas_is_not_unfolded(tmp_path: Path) -> None:
    # RFC 9649: canvas width and height minus one, 24 bits each, in the VP8X chunk.
    path = tmp_path / "a.webp"
    second = Image.new("RGBA", (64, 64), (9, 9, 9, 9))
    Image.new("RGBA", (64, 64)).save(path, save_all=True, append_images=[second])
    raw = bytearray(path.read_bytes())
    at = raw.index(b"VP8X") + 12
    raw[at : at + 6] = (16382).to_bytes(3, "little") * 2
    path.write_bytes(raw)
    idle, _ = memory_of(SHOW.format(ask="thumbnail", times=0), path)
    peak, said = memory_of(SHOW.format(ask="thumbnail", times=1), path)
    assert said.startswith("InputError")
    assert peak - idle < 60_000_000


@pytest.mark.parametrize("ending", ["jpg", "png", "webp"])
def test_a_picture_that_is_cut_off_anywhere_is_one_sentence(tmp_path: Path, ending: str) -> None:
    whole = picture(tmp_path / f"whole.{ending}").read_bytes()
    path = tmp_path / f"cut.{ending}"
    for cut in range(1, len(whole) - 30, len(whole) // 40):
        path.write_bytes(whole[:cut])
        with pytest.raises(InputError) as caught:
            thumbnail(path)
        assert str(caught.value).startswith(f"cut.{ending}: ")
        assert "\n" not in str(caught.value)


@pytest.mark.parametrize("ending", ["jpg", "png", "webp"])
def test_damaged_pictures_are_shown_or_one_sentence_never_anything_else(
    tmp_path: Path, ending: str
) -> None:
    dice = random.Random(ending)
    exif = Image.Exif()
    exif[0x0112] = 6
    exif.get_ifd(0x8825)[1] = "N"
    whole_path = tmp_path / f"whole.{ending}"
    Image.frombytes("RGB", (40, 30), dice.randbytes(3600)).save(whole_path, exif=exif)
    whole, path = whole_path.read_bytes(), tmp_path / f"a.{ending}"
    outcomes: set[bool | str] = set()
    for _ in range(400):
        raw = bytearray(whole)
        # Mostly near the start, where sizes, offsets and metadata are told.
        for _ in range(dice.randint(1, 8)):
            reach = len(raw) if dice.random() < 0.3 else min(200, len(raw))
            raw[dice.randrange(reach)] = dice.randrange(256)
        path.write_bytes(raw)
        for read in (read_metadata, thumbnail, lambda p: half_blocks(p, 8, 4)):
            try:
                outcomes.add(read(path) is not None)
            except InputError as error:
                assert "\n" not in str(error)
                outcomes.add("refused")
    assert outcomes >= {True, "refused"}


def test_what_only_pretends_to_be_a_picture_is_none(tmp_path: Path) -> None:
    for name, raw in {
        "a.jpg": b"%PDF-1.7 not a picture",
        "b.png": b"\x89PNG\r\n\x1a\n",
        "c.jpg": b"<svg xmlns='http://www.w3.org/2000/svg'/>",
        "d.jpg": b"GIF89a\x01\x00\x01\x00\x00\x00\x00;",
        "e.tif": b"II*\0",
        "f.jpg": b"P6 1 1 255 abc",
        "g.jpg": b"%!PS-Adobe-3.0 EPSF-3.0\n%%BoundingBox: 0 0 9 9\n",
    }.items():
        (tmp_path / name).write_bytes(raw)
        with pytest.raises(InputError):
            thumbnail(tmp_path / name)


def test_a_picture_with_a_wrong_ending_is_known_by_its_content(tmp_path: Path) -> None:
    path = picture(tmp_path / "a.png").rename(tmp_path / "a.jpg")
    assert thumbnail(path).width == 300
    told = read_metadata(path)
    assert told is not None
    assert (told.width, told.height) == (300, 200)
