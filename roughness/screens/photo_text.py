"""What is said of a photo or document: what it shows, when, where, and whether it is intact."""

from rich.text import Text

from roughness.desk.evidence_lists import Item
from roughness.evidence.naming import PHOTO_ENDINGS, ending_of
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, rounded

_STATES = {
    "ok": "as it was attached",
    "missing": "! missing",
    "changed": "! changed: not the file that was attached",
}


def heading(item: Item) -> str:
    """Return the caption, else the name that the file came with."""
    return printable(item.evidence.caption or item.evidence.name)


def about_lines(item: Item) -> list[Text]:
    """Return three lines about an item: what it supports, when and where, which file."""
    about = item.evidence
    factors = enumerate_words(about.factors) if about.factors else "any factor"
    belongs = [printable(word) for word in (about.part, about.condition) if word]
    where = ", ".join(belongs) or "the whole reach"
    told = [
        f"Supports {factors}; {where}",
        f"{_when(item)}; {_position(item)}",
        f"{printable(about.name)}, {_size(about.size)}, sha256 {about.sha256[:12]};"
        f" {_STATES[item.held]}; by {printable(item.line.by)}",
    ]
    return [Text(line, no_wrap=True, overflow="ellipsis") for line in told]


def why_not_shown(item: Item) -> str:
    """Say why there is no picture, and where the file is."""
    file = printable(str(item.path))
    if item.held == "missing":
        return f"Missing: there is no file {file}"
    if item.held == "changed":
        return f"Changed: what lies there is not what was attached, and is not opened.\n{file}"
    kind = ending_of(item.evidence.file).upper()
    return f"A document ({kind}), not shown in the terminal. It is kept as it came:\n{file}"


def is_photo(item: Item) -> bool:
    """Whether it is a picture by its ending."""
    return ending_of(item.evidence.file) in PHOTO_ENDINGS


def state_word(item: Item) -> str:
    """Return the state in one word."""
    return item.held if item.held == "ok" else f"! {item.held}"


def _when(item: Item) -> str:
    taken = item.evidence.taken_at
    if taken is None:
        return "when it was taken is not told" if is_photo(item) else "a document"
    return f"taken {printable(taken).replace('T', ' ')}"


def _position(item: Item) -> str:
    if item.evidence.position is None:
        return "no position"
    longitude, latitude = item.evidence.position
    north = "N" if latitude >= 0 else "S"
    east = "E" if longitude >= 0 else "W"
    return f"{rounded(abs(latitude), 5)}° {north}, {rounded(abs(longitude), 5)}° {east}"


def _size(size: int) -> str:
    return f"{rounded(size / 1e6, 1)} MB" if size >= 1e5 else f"{rounded(size / 1e3, 1)} kB"
