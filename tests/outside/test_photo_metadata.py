"""Metadata laid out by hand, byte by byte, and read back; hashes by another program.

The bytes follow TIFF Revision 6.0 (Adobe, 1992, section 2: header, directories of 12-byte
entries, types 2 ASCII, 3 SHORT, 4 LONG, 5 RATIONAL, values of more than four bytes elsewhere)
and the tags of EXIF (CIPA DC-008: 0x8769 and 0x8825 lead to the EXIF and GPS directories,
0x9003 DateTimeOriginal, 0x9011 OffsetTimeOriginal; GPS 1 to 4 references and values, 18
datum). JPEG carries them in an APP1 segment that begins with ``Exif`` and two zeros. Tag
numbers and layout are written down from memory of those standards; that a second reader
finds the same is what is tested here.
"""

import hashlib
import io
import shutil
import struct
import subprocess
from dataclasses import dataclass
from pathlib import Path

import pytest
from PIL import Image

from roughness.evidence.keeping import keep_copy
from roughness.evidence.metadata import Told, read_metadata

ASCII, SHORT, LONG, RATIONAL = 2, 3, 4, 5
Entry = tuple[int, int, int, bytes]


@dataclass(frozen=True)
class Writer:
    """Writes one byte order: ``<`` (II) or ``>`` (MM)."""

    order: str

    def ascii(self, tag: int, text: str) -> Entry:
        raw = text.encode("ascii") + b"\0"
        return tag, ASCII, len(raw), raw

    def short(self, tag: int, value: int) -> Entry:
        return tag, SHORT, 1, struct.pack(f"{self.order}H", value)

    def rationals(self, tag: int, *pairs: tuple[int, int]) -> Entry:
        raw = b"".join(struct.pack(f"{self.order}II", *pair) for pair in pairs)
        return tag, RATIONAL, len(pairs), raw

    def directory(self, entries: list[Entry], at: int) -> bytes:
        """Lay out one directory that begins ``at`` bytes after the TIFF header."""
        head = struct.pack(f"{self.order}H", len(entries))
        data_at = at + 2 + 12 * len(entries) + 4
        data = b""
        for tag, kind, count, raw in entries:
            head += struct.pack(f"{self.order}HHI", tag, kind, count)
            if len(raw) <= 4:
                head += raw.ljust(4, b"\0")
            else:
                head += struct.pack(f"{self.order}I", data_at + len(data))
                data += raw + b"\0" * (len(raw) % 2)
        return head + struct.pack(f"{self.order}I", 0) + data

    def block(self, exif: list[Entry], gps: list[Entry]) -> bytes:
        mark = b"II" if self.order == "<" else b"MM"
        header = mark + struct.pack(f"{self.order}HI", 42, 8)
        first_size = 2 + 12 * 2 + 4
        exif_at = 8 + first_size
        exif_raw = self.directory(exif, exif_at)
        gps_at = exif_at + len(exif_raw)
        first = [
            (0x8769, LONG, 1, struct.pack(f"{self.order}I", exif_at)),
            (0x8825, LONG, 1, struct.pack(f"{self.order}I", gps_at)),
        ]
        return header + self.directory(first, 8) + exif_raw + self.directory(gps, gps_at)


def photo(path: Path, block: bytes) -> Path:
    """Put a block of metadata into a JPEG that has none, right behind its first marker."""
    out = io.BytesIO()
    Image.new("RGB", (16, 8), (60, 90, 60)).save(out, "JPEG")
    raw = out.getvalue()
    body = b"Exif\0\0" + block
    segment = b"\xff\xe1" + struct.pack(">H", len(body) + 2) + body
    path.write_bytes(raw[:2] + segment + raw[2:])
    return path


def place(
    write: Writer,
    latitude: tuple[tuple[int, int], ...],
    longitude: tuple[tuple[int, int], ...],
    signs: str = "NE",
) -> list[Entry]:
    return [
        write.ascii(1, signs[0]),
        write.rationals(2, *latitude),
        write.ascii(3, signs[1]),
        write.rationals(4, *longitude),
    ]


NORTH = ((47, 1), (30, 1), (3600, 100))  # 47 deg 30' 36" = 47.51
EAST = ((8, 1), (15, 1), (0, 1))  # 8 deg 15' = 8.25


@pytest.fixture(params=["<", ">"], ids=["II", "MM"])
def write(request: pytest.FixtureRequest) -> Writer:
    return Writer(request.param)


def told(tmp_path: Path, block: bytes) -> Told:
    read = read_metadata(photo(tmp_path / "a.jpg", block))
    assert read is not None
    return read


@pytest.mark.parametrize(
    ("signs", "wanted"),
    [
        ("NE", (8.25, 47.51)),
        ("SE", (8.25, -47.51)),
        ("NW", (-8.25, 47.51)),
        ("SW", (-8.25, -47.51)),
    ],
)
def test_time_with_its_offset_and_the_place_are_read_in_both_byte_orders(
    tmp_path: Path, write: Writer, signs: str, wanted: tuple[float, float]
) -> None:
    exif = [write.ascii(0x9003, "2026:06:30 14:03:22"), write.ascii(0x9011, "+02:00")]
    read = told(tmp_path, write.block(exif, place(write, NORTH, EAST, signs)))
    assert read.taken_at == "2026-06-30T14:03:22+02:00"
    assert read.position == pytest.approx(wanted, abs=1e-9)
    assert (read.width, read.height) == (16, 8)


def test_a_time_without_offset_stays_without(tmp_path: Path, write: Writer) -> None:
    block = write.block([write.ascii(0x9003, "2026:06:30 14:03:22")], [])
    assert told(tmp_path, block).taken_at == "2026-06-30T14:03:22"


@pytest.mark.parametrize("offset", ["", "   :  ", "+2", "Z", "+25:00", "+02:99"])
def test_an_offset_that_is_none_is_left_out(tmp_path: Path, write: Writer, offset: str) -> None:
    exif = [write.ascii(0x9003, "2026:06:30 14:03:22"), write.ascii(0x9011, offset)]
    assert told(tmp_path, write.block(exif, [])).taken_at == "2026-06-30T14:03:22"


@pytest.mark.parametrize(
    "text", ["0000:00:00 00:00:00", "    :  :     :  :  ", "", "2026:13:01 00:00:00", "soon"]
)
def test_a_time_that_the_camera_did_not_know_is_no_time(
    tmp_path: Path, write: Writer, text: str
) -> None:
    assert told(tmp_path, write.block([write.ascii(0x9003, text)], [])).taken_at is None


def test_decimal_minutes_and_decimal_degrees_are_read(tmp_path: Path, write: Writer) -> None:
    # 51 deg 28.0656' = 51.46776; 0.2981 deg west: two other ways in which cameras write.
    latitude = ((51, 1), (280656, 10000), (0, 1))
    longitude = ((2981, 10000), (0, 1), (0, 1))
    read = told(tmp_path, write.block([], place(write, latitude, longitude, "NW")))
    assert read.position == pytest.approx((-0.2981, 51.46776), abs=1e-9)


@pytest.mark.parametrize(
    "latitude",
    [
        ((47, 0), (30, 1), (0, 1)),
        ((47, 1), (0, 0), (0, 1)),
        ((47, 1), (30, 1), (36, 0)),
        ((91, 1), (0, 1), (0, 1)),
        ((47, 1), (61, 1), (0, 1)),
        ((47, 1), (30, 1)),
        ((4294967295, 1), (4294967295, 1), (4294967295, 1)),
    ],
    ids=["47/0", "0/0", "36/0", "beyond the pole", "61 minutes", "two numbers", "largest"],
)
def test_a_place_that_cannot_be_is_no_place(
    tmp_path: Path, write: Writer, latitude: tuple[tuple[int, int], ...]
) -> None:
    assert told(tmp_path, write.block([], place(write, latitude, EAST))).position is None


def test_the_poles_and_the_far_meridian_are_places(tmp_path: Path, write: Writer) -> None:
    pole, far = ((90, 1), (0, 1), (0, 1)), ((180, 1), (0, 1), (0, 1))
    read = told(tmp_path, write.block([], place(write, pole, far, "SW")))
    assert read.position == (-180.0, -90.0)


def test_a_place_without_its_hemisphere_is_no_place(tmp_path: Path, write: Writer) -> None:
    whole = place(write, NORTH, EAST)
    for missing in range(4):
        gps = whole[:missing] + whole[missing + 1 :]
        assert told(tmp_path, write.block([], gps)).position is None


@pytest.mark.parametrize(
    ("datum", "is_place"), [("WGS-84", True), ("WGS 84", True), ("TOKYO", False), ("", True)]
)
def test_a_place_in_another_datum_is_no_place(
    tmp_path: Path, write: Writer, datum: str, is_place: bool
) -> None:
    gps = [*place(write, NORTH, EAST), write.ascii(18, datum)]
    assert (told(tmp_path, write.block([], gps)).position is not None) == is_place


def test_directories_that_lead_nowhere_say_nothing(tmp_path: Path, write: Writer) -> None:
    exif = [write.ascii(0x9003, "2026:06:30 14:03:22")]
    block = write.block(exif, place(write, NORTH, EAST))
    for cut in range(8, len(block), 5):
        path = photo(tmp_path / "cut.jpg", block[:cut])
        read = read_metadata(path)
        assert read is not None
        assert read.position is None or cut >= len(block) - 8
        assert read.taken_at in (None, "2026-06-30T14:03:22")


def test_the_hash_of_the_copy_is_what_other_programs_say(tmp_path: Path) -> None:
    source = tmp_path / "bank.txt"
    source.write_bytes(b"willows, 2 m\r\n" * 70_001)
    kept = keep_copy(tmp_path, source)
    copy = tmp_path / kept.file
    assert kept.sha256 == hashlib.sha256(source.read_bytes()).hexdigest()
    if program := shutil.which("sha256sum"):
        said = subprocess.run([program, copy], capture_output=True, text=True, check=True).stdout
        assert said.split()[0] == kept.sha256
    assert kept.size == copy.stat().st_size == 14 * 70_001


def test_the_published_hash_of_three_letters(tmp_path: Path) -> None:
    # FIPS 180-4 example, "abc" (NIST Cryptographic Standards: Example Values, SHA-256).
    source = tmp_path / "abc.txt"
    source.write_bytes(b"abc")
    assert keep_copy(tmp_path, source).sha256 == (
        "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
    )
