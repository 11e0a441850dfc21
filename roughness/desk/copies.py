"""Copies of a survey's trails: where they lie, and which of them can be read."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path

from roughness.desk.folder import SurveyFolder
from roughness.errors import InputError, RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.trail.merging import hindrances, origin
from roughness.trail.naming import REACHES, shown
from roughness.trail.reading import Trail, read_trail


@dataclass(frozen=True)
class Copy:
    """A file with a trail in it that can be united with another."""

    path: Path
    name: str
    """As messages name it."""
    trail: Trail
    inside: bool
    """Whether it lies in the survey's own folder."""

    @property
    def first(self) -> str:
        """Hash of the first line: what tells which trail it is."""
        return origin(self.trail)


@dataclass(frozen=True)
class NotTaken:
    """A file that was left aside, and why."""

    file: str
    why: str


Found = tuple[tuple[Copy, ...], tuple[NotTaken, ...]]


def copies_in(other: Path) -> Found:
    """Return the trails of another folder, or of one file, and what cannot be used of it.

    Raises
    ------
    InputError
        Where there is no such file or folder, or no trail in it.
    """
    if not other.exists():
        raise InputError(
            "it is not there", where=printable(str(other)), wanted="name a folder or a trail"
        )
    found = _sorted_out(_files_in(other) if other.is_dir() else [other], inside=False)
    if not any(found):
        raise InputError(
            "it holds no trail", where=printable(str(other)), wanted="a copy of the survey's folder"
        )
    return found


def copies_of(survey: SurveyFolder) -> Found:
    """Return the conflict copies inside the survey: other files that begin like its trails."""
    mine = own_trails(survey)
    strangers = {
        path: _read(path)
        for path in _files_in(survey.folder)
        if path not in mine and not path.is_symlink()
    }
    known = {origin(trail) for trail in mine.values() if trail.lines}
    known |= {reach.first_line for reach in survey.state.reaches}
    for trail in strangers.values():
        if origin(trail) == origin(survey.trail()):  # it may note a reach of its own
            known |= {str(n.data.get("first_line")) for n in trail.lines if n.kind == "reach"}
    begun = [path for path, trail in strangers.items() if origin(trail) in known]
    return _sorted_out(begun, inside=True)


def own_trails(survey: SurveyFolder) -> dict[Path, Trail]:
    """Return the survey's trails by file; an empty one where a file cannot be read."""
    found = {survey.path: survey.trail()}
    for reach in survey.state.reaches:
        try:
            path = survey.reach_path(reach.reach)
            found[path] = Trail(shown(path))
            found[path] = survey.reach_trail(reach.reach)
        except RoughnessError:
            continue
    return found


def _files_in(folder: Path) -> Iterator[Path]:
    for inside in (folder, folder / REACHES):
        if not inside.is_symlink() or inside == folder:
            yield from sorted(p for p in inside.glob("*.jsonl") if not p.name.startswith("."))


def _read(path: Path) -> Trail:
    try:
        return read_trail(path)
    except RoughnessError:
        return Trail(shown(path))


def _sorted_out(files: Iterable[Path], *, inside: bool) -> Found:
    usable, refused = [], []
    for path in files:
        name = shown(path) if inside else printable(str(path))
        try:
            trail = read_trail(path)
            why = _why_not(path, trail)
        except RoughnessError as error:
            why = str(error).removeprefix(f"{shown(path)} ")
        if why:
            refused.append(NotTaken(name, why))
        else:
            usable.append(Copy(path, name, trail, inside))
    return tuple(usable), tuple(refused)


def _why_not(path: Path, trail: Trail) -> str | None:
    if path.is_symlink():
        return "it is a link; links are not followed"
    if not trail.lines and not trail.newer:
        return "it is no trail of a survey"
    if faults := hindrances(trail):
        return f"line {faults[0].line}: {faults[0].what}"
    if trail.torn:
        return (
            f"its last line is cut off ({len(trail.torn)} bytes without a line end); copy it again,"
            " or where no better copy is left, remove what stands after the last line end"
        )
    return None
