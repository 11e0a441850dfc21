"""Evidence: what is kept of a file, what a picture shows, what a watched folder gives."""

import hashlib
import io
import os
import stat
from pathlib import Path

import pytest
from PIL import Image, PngImagePlugin

from roughness.errors import InputError, RecordError
from roughness.evidence.holding import held, unlisted
from roughness.evidence.keeping import keep_copy
from roughness.evidence.naming import stored_name, stored_path
from roughness.evidence.pictures import half_blocks, thumbnail
from roughness.evidence.watching import Watcher

RED, GREEN, BLUE, WHITE = (255, 0, 0), (0, 160, 0), (0, 0, 255), (255, 255, 255)


def quadrants(size: tuple[int, int] = (400, 200)) -> Image.Image:
    """Red above left, green above right, blue below left, white below right."""
    image = Image.new("RGB", size, WHITE)
    half = size[0] // 2, size[1] // 2
    image.paste(RED, (0, 0, *half))
    image.paste(GREEN, (half[0], 0, size[0], half[1]))
    image.paste(BLUE, (0, half[1], half[0], size[1]))
    return image


def saved(path: Path, image: Image.Image, **options: object) -> Path:
    image.save(path, **options)  # type: ignore[arg-type]
    return path


def is_near(found: object, wanted: tuple[int, int, int], by: int = 12) -> bool:
    assert isinstance(found, tuple)
    return all(abs(a - b) <= by for a, b in zip(found, wanted, strict=True))


# -- keeping ----------------------------------------------------------------------------


def test_the_copy_is_the_same_bytes_and_the_source_is_as_it_was(tmp_path: Path) -> None:
    source = saved(tmp_path / "Weir 3.JPG", quadrants())
    before = source.read_bytes(), source.stat().st_mtime_ns
    kept = keep_copy(tmp_path, source)
    digest = hashlib.sha256(before[0]).hexdigest()
    assert (source.read_bytes(), source.stat().st_mtime_ns) == before
    assert (tmp_path / kept.file).read_bytes() == before[0]
    assert kept.file == f"evidence/{digest[:12]}-weir-3.jpg"
    assert (kept.sha256, kept.size, kept.name) == (digest, len(before[0]), "Weir 3.JPG")
    assert [p.name for p in (tmp_path / "evidence").iterdir()] == [Path(kept.file).name]


@pytest.mark.skipif(os.name == "nt", reason="modes of files are another matter there")
def test_the_copy_can_be_read_by_whoever_may_read_other_files(tmp_path: Path) -> None:
    source = tmp_path / "a.txt"
    source.write_text("gauge read 0.84 m")
    kept = keep_copy(tmp_path, source)
    assert stat.S_IMODE((tmp_path / kept.file).stat().st_mode) == stat.S_IMODE(
        source.stat().st_mode
    )


def test_the_same_bytes_under_another_name_make_no_second_copy(tmp_path: Path) -> None:
    first, second = tmp_path / "a.txt", tmp_path / "b.txt"
    first.write_text("one")
    second.write_text("one")
    kept, again = keep_copy(tmp_path, first), keep_copy(tmp_path, second)
    assert (kept.is_new, again.is_new) == (True, False)
    assert kept.file == again.file
    assert len(list((tmp_path / "evidence").iterdir())) == 1


def test_two_photos_with_one_name_stand_beside_each_other(tmp_path: Path) -> None:
    source = tmp_path / "IMG_0001.png"
    one = keep_copy(tmp_path, saved(source, quadrants()))
    two = keep_copy(tmp_path, saved(source, quadrants((80, 40))))
    assert one.file != two.file
    assert held(tmp_path, one.file, one.sha256, one.size) == "ok"
    assert held(tmp_path, two.file, two.sha256, two.size) == "ok"


@pytest.mark.parametrize(
    ("name", "wanted"),
    [
        ("../../etc/passwd.txt", "passwd.txt"),
        ("/root/a b.PDF", "a-b.pdf"),
        ("-rf.txt", "rf.txt"),
        ("...jpg", "file.jpg"),
        ("\u202egpj.txt", "gpj.txt"),
        ("河.png", "file.png"),
        ("Crête.jpeg", "crete.jpeg"),
        ("con.txt", "con.txt"),  # the hash before it makes it a plain name everywhere
        ("x" * 300 + ".csv", "x" * 60 + ".csv"),
        ("a$(reboot);'\"<b>.tif", "a-reboot-b.tif"),
    ],
)
def test_the_stored_name_is_harmless_and_keeps_the_ending(name: str, wanted: str) -> None:
    assert stored_name("0123456789abcdef" * 4, name) == f"evidence/0123456789ab-{wanted}"


@pytest.mark.parametrize(
    "file",
    [
        "evidence/../survey.jsonl",
        "/etc/passwd",
        "evidence/0123456789ab-../../x.jpg",
        "evidence/0123456789ab-a\\..\\b.jpg",
        "evidence/0123456789ab-a.jpg:stream",
        "evidence/0123456789AB-a.jpg",
        "reaches/0123456789ab-a.jpg",
        "",
    ],
)
def test_a_trail_cannot_name_a_file_outside_the_evidence(tmp_path: Path, file: str) -> None:
    with pytest.raises(RecordError, match="is no file name of evidence"):
        stored_path(tmp_path, file)
    assert held(tmp_path, file, "0" * 64, 1) == "changed"


def test_no_link_is_followed_from_a_trail(tmp_path: Path) -> None:
    survey, source = tmp_path / "s", tmp_path / "a.txt"
    survey.mkdir()
    source.write_text("a")
    kept = keep_copy(survey, source)
    elsewhere = (survey / "evidence").rename(tmp_path / "elsewhere")
    (survey / "evidence").symlink_to(elsewhere)
    with pytest.raises(RecordError, match="is a link"):
        stored_path(survey, kept.file)
    assert held(survey, kept.file, kept.sha256, kept.size) == "changed"
    (survey / "evidence").unlink()
    (survey / "evidence").mkdir()
    (survey / kept.file).symlink_to(source)
    with pytest.raises(RecordError, match="is a link"):
        stored_path(survey, kept.file)


def test_evidence_that_went_or_changed_is_told_apart(tmp_path: Path) -> None:
    source = tmp_path / "a.txt"
    source.write_text("0.84 m")
    kept = keep_copy(tmp_path, source)
    copy = tmp_path / kept.file
    old = copy.stat()
    copy.write_text("0.48 m")
    os.utime(copy, ns=(old.st_atime_ns, old.st_mtime_ns))  # not even the time gives it away
    assert held(tmp_path, kept.file, kept.sha256, kept.size) == "changed"
    copy.unlink()
    assert held(tmp_path, kept.file, kept.sha256, kept.size) == "missing"
    copy.mkdir()
    assert held(tmp_path, kept.file, kept.sha256, kept.size) == "changed"


def test_what_no_trail_names_is_listed(tmp_path: Path) -> None:
    source = tmp_path / "a.txt"
    source.write_text("a")
    kept = keep_copy(tmp_path, source)
    (tmp_path / "evidence" / "dropped.jpg").write_bytes(b"x")
    assert unlisted(tmp_path, [kept.file]) == ("evidence/dropped.jpg",)
    assert unlisted(tmp_path / "nowhere", []) == ()


# -- pictures ---------------------------------------------------------------------------


def test_a_thumbnail_is_small_keeps_proportions_and_shows_the_picture(tmp_path: Path) -> None:
    small = thumbnail(saved(tmp_path / "a.png", quadrants()), 100)
    assert (small.width, small.height, small.media_type) == (100, 50, "image/jpeg")
    with Image.open(io.BytesIO(small.data)) as image:
        assert image.size == (100, 50)
        corners = [image.getpixel(at) for at in ((10, 10), (90, 10), (10, 40), (90, 40))]
    assert all(map(is_near, corners, (RED, GREEN, BLUE, WHITE)))


def test_a_small_picture_is_not_made_larger(tmp_path: Path) -> None:
    assert thumbnail(saved(tmp_path / "a.png", quadrants((8, 4)))).width == 8


def test_the_same_picture_gives_the_same_bytes(tmp_path: Path) -> None:
    path = saved(tmp_path / "a.jpg", quadrants())
    assert thumbnail(path).data == thumbnail(path).data


# Where the corner that is stored first ends up, EXIF tag 0x0112 (CIPA DC-008, 4.6.4):
# which colours stand above left and below right of the upright picture.
UPRIGHT = {
    1: (RED, WHITE),
    2: (GREEN, BLUE),
    3: (WHITE, RED),
    4: (BLUE, GREEN),
    5: (RED, WHITE),
    6: (BLUE, GREEN),
    7: (WHITE, RED),
    8: (GREEN, BLUE),
}


@pytest.mark.parametrize("orientation", UPRIGHT)
@pytest.mark.parametrize("ending", ["jpg", "png", "webp"])
def test_a_picture_stands_upright_whichever_way_the_camera_was_held(
    tmp_path: Path, orientation: int, ending: str
) -> None:
    exif = Image.Exif()
    exif[0x0112] = orientation
    options: dict[str, object] = {"lossless": True} if ending == "webp" else {}
    path = saved(tmp_path / f"a.{ending}", quadrants(), exif=exif, **options)
    small = thumbnail(path, 100)
    assert (small.width, small.height) == ((100, 50) if orientation < 5 else (50, 100))
    with Image.open(io.BytesIO(small.data)) as image:
        first, last = UPRIGHT[orientation]
        assert is_near(image.getpixel((8, 8)), first)
        assert is_near(image.getpixel((image.width - 8, image.height - 8)), last)


@pytest.mark.parametrize("ending", ["jpg", "png", "webp"])
def test_no_metadata_of_the_photo_is_left_in_a_thumbnail(tmp_path: Path, ending: str) -> None:
    secret = "PRIVATE-47.51N"
    exif = Image.Exif()
    exif[0x010E] = exif[0x0131] = exif[0x8298] = secret
    exif.get_ifd(0x8825)[29] = secret
    options: dict[str, object] = {"exif": exif, "icc_profile": secret.encode()}
    if ending == "jpg":
        options |= {"comment": secret, "dpi": (311, 311)}
    elif ending == "png":
        info = PngImagePlugin.PngInfo()
        info.add_text("Comment", secret)
        options |= {"pnginfo": info}
    elif ending == "webp":
        options |= {"xmp": secret.encode()}
    path = saved(tmp_path / f"a.{ending}", quadrants(), **options)
    assert secret.encode() in path.read_bytes()
    data = thumbnail(path).data
    assert secret.encode() not in data
    with Image.open(io.BytesIO(data)) as image:
        assert not image.getexif()
        assert set(image.info) <= {"jfif", "jfif_version", "jfif_unit", "jfif_density"}
        assert image.info["jfif_density"] == (1, 1)


@pytest.mark.parametrize(
    ("mode", "colour", "wanted"),
    [
        ("L", 128, (128, 128, 128)),
        ("1", 1, WHITE),
        ("LA", (0, 0), WHITE),
        ("RGBA", (255, 0, 0, 0), WHITE),
        ("RGBA", (0, 0, 0, 128), (127, 127, 127)),
        ("I;16", 32768, (128, 128, 128)),
        ("P", 0, (0, 0, 0)),
    ],
)
def test_pictures_of_other_modes_are_shown_on_white_paper(
    tmp_path: Path, mode: str, colour: int, wanted: tuple[int, int, int]
) -> None:
    path = saved(tmp_path / "a.png", Image.new(mode, (20, 20), colour))
    with Image.open(io.BytesIO(thumbnail(path).data)) as image:
        assert is_near(image.getpixel((10, 10)), wanted, 3)


def test_inks_of_a_print_shop_are_shown(tmp_path: Path) -> None:
    path = saved(tmp_path / "a.jpg", Image.new("CMYK", (20, 20), (0, 255, 255, 0)))
    with Image.open(io.BytesIO(thumbnail(path).data)) as image:
        assert is_near(image.getpixel((10, 10)), RED, 6)


def test_half_blocks_show_two_pixels_above_each_other(tmp_path: Path) -> None:
    path = saved(tmp_path / "a.png", quadrants((4, 4)))
    assert half_blocks(path, 4, 2) == (
        (("▀▀", RED, RED), ("▀▀", GREEN, GREEN)),
        (("▀▀", BLUE, BLUE), ("▀▀", WHITE, WHITE)),
    )
    odd = half_blocks(saved(tmp_path / "b.png", Image.new("RGB", (3, 3), RED)), 3, 9)
    assert odd == ((("▀▀▀", RED, RED),), (("▀▀▀", RED, None),))


@pytest.mark.parametrize(("columns", "rows"), [(1, 1), (80, 24), (7, 90), (200, 3)])
@pytest.mark.parametrize("size", [(400, 200), (200, 400), (1, 900), (900, 1), (3, 3)])
def test_half_blocks_fit_the_room_and_keep_the_proportions(
    tmp_path: Path, columns: int, rows: int, size: tuple[int, int]
) -> None:
    lines = half_blocks(saved(tmp_path / "a.png", quadrants(size)), columns, rows)
    widths = {sum(len(cells.text) for cells in line) for line in lines}
    assert len(widths) == 1
    width = widths.pop()
    assert 1 <= width <= columns
    assert 1 <= len(lines) <= rows
    scale = min(columns / size[0], 2 * rows / size[1])
    assert abs(width - max(1, scale * size[0])) <= 0.5
    assert abs(2 * len(lines) - max(1, scale * size[1])) <= 1.5


def test_there_must_be_room_for_a_picture(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="no room"):
        half_blocks(saved(tmp_path / "a.png", quadrants()), 0, 4)


# -- a watched folder -------------------------------------------------------------------


def names(found: tuple[Path, ...]) -> list[str]:
    return [path.name for path in found]


def test_a_file_is_told_once_when_it_stood_still_for_two_seconds(tmp_path: Path) -> None:
    watcher = Watcher(tmp_path)
    assert watcher.look(100.0) == ()
    (tmp_path / "a.jpg").write_bytes(b"1")
    assert watcher.look(101.0) == ()
    assert watcher.look(102.9) == ()
    assert watcher.look(103.0) == (tmp_path / "a.jpg",)
    assert watcher.look(110.0) == ()


def test_a_file_that_grows_is_waited_for(tmp_path: Path) -> None:
    watcher, path = Watcher(tmp_path), tmp_path / "a.jpg"
    for second in range(6):
        path.write_bytes(b"x" * (second + 1))
        assert watcher.look(float(second)) == ()
    assert watcher.look(6.9) == ()
    assert names(watcher.look(7.0)) == ["a.jpg"]


def test_a_file_written_again_with_as_many_bytes_is_waited_for(tmp_path: Path) -> None:
    watcher, path = Watcher(tmp_path), tmp_path / "a.jpg"
    path.write_bytes(b"old")
    watcher.look(0.0)
    path.write_bytes(b"new")
    os.utime(path, ns=(1, 1))
    assert watcher.look(2.5) == ()
    assert names(watcher.look(4.5)) == ["a.jpg"]


def test_an_empty_file_is_not_written_yet(tmp_path: Path) -> None:
    watcher, path = Watcher(tmp_path), tmp_path / "a.jpg"
    path.touch()
    assert watcher.look(0.0) == watcher.look(9.0) == ()
    path.write_bytes(b"1")
    assert watcher.look(10.0) == ()
    assert names(watcher.look(12.0)) == ["a.jpg"]


def test_links_folders_hidden_files_and_parts_are_never_told(tmp_path: Path) -> None:
    inbox = tmp_path / "inbox"
    inbox.mkdir()
    (tmp_path / "secret.txt").write_text("s")
    (inbox / "link.txt").symlink_to(tmp_path / "secret.txt")
    (inbox / "folder.jpg").mkdir()
    parts = ["a.jpg.part", "a.jpg.crdownload", "a.TMP", "a.txt~", "~$a.docx", "Thumbs.db"]
    for name in [".hidden.jpg", *parts]:
        (inbox / name).write_text("x")
    if hasattr(os, "mkfifo"):
        os.mkfifo(inbox / "pipe.jpg")
    (inbox / "b.jpg").write_text("x")
    watcher = Watcher(inbox)
    watcher.look(0.0)
    assert names(watcher.look(5.0)) == ["b.jpg"]


def test_a_clock_that_goes_backwards_only_makes_waiting_begin_anew(tmp_path: Path) -> None:
    (tmp_path / "a.jpg").write_text("x")
    watcher = Watcher(tmp_path)
    assert watcher.look(1000.0) == ()
    assert watcher.look(10.0) == ()
    assert watcher.look(11.0) == ()
    assert names(watcher.look(12.0)) == ["a.jpg"]


def test_a_file_that_is_replaced_is_told_again_and_one_that_went_is_forgotten(
    tmp_path: Path,
) -> None:
    watcher, path = Watcher(tmp_path), tmp_path / "a.jpg"
    path.write_text("x")
    watcher.look(0.0)
    assert names(watcher.look(2.0)) == ["a.jpg"]
    path.write_text("another")
    watcher.look(3.0)
    assert names(watcher.look(5.0)) == ["a.jpg"]
    path.rename(tmp_path.parent / "aside.jpg")
    assert watcher.look(6.0) == ()
    (tmp_path.parent / "aside.jpg").rename(path)
    watcher.look(7.0)
    assert names(watcher.look(9.0)) == ["a.jpg"]
    tmp_path.rename(tmp_path.with_name("gone"))
    assert watcher.look(12.0) == ()


def test_what_lay_there_before_may_be_passed_over(tmp_path: Path) -> None:
    (tmp_path / "old.jpg").write_text("x")
    watcher = Watcher(tmp_path, only_new=True)
    watcher.look(0.0)
    (tmp_path / "new.jpg").write_text("x")
    assert watcher.look(3.0) == ()
    assert names(watcher.look(5.0)) == ["new.jpg"]
