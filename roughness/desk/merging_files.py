"""Evidence and handbooks of another copy of the survey, taken where they are what trails say."""

import shutil
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from roughness.desk.folder import SurveyFolder
from roughness.desk.whole_files import write_whole
from roughness.errors import HandbookError, InputError, RecordError
from roughness.evidence.holding import held
from roughness.evidence.naming import checked_ending, stored_path
from roughness.quantities.foreign_text import printable
from roughness.shelf.folders import contents, hash_in
from roughness.trail.kinds import read_data
from roughness.trail.lines import Line
from roughness.trail.reading import Trail
from roughness.trail.review_data import Evidence


@dataclass(frozen=True)
class FilesTaken:
    """What was copied, and what was left where it is."""

    copied: tuple[str, ...] = ()
    left: tuple[str, ...] = ()
    """One sentence each."""


def take_files(survey: SurveyFolder, other: Path, trails: Mapping[Path, Trail]) -> FilesTaken:
    """Copy the evidence and handbooks that the survey's trails name and its folder lacks.

    Parameters
    ----------
    survey : SurveyFolder
        Where they are copied to.
    other : Path
        Another copy of the survey's folder; nothing is taken where it is a single trail.
    trails : mapping
        The survey's trails as they are now.

    Raises
    ------
    NotKeptError
        Where the disk did not take a file.
    """
    if not other.is_dir():
        return FilesTaken()
    taken = [*_evidence(survey, other, trails), *_handbooks(survey, other, trails)]
    return FilesTaken(
        copied=tuple(file for file, why in taken if not why),
        left=tuple(f"{file}: {why}" for file, why in taken if why),
    )


def _evidence(
    survey: SurveyFolder, other: Path, trails: Mapping[Path, Trail]
) -> Iterator[tuple[str, str]]:
    for file, sha256, size in sorted(_named_evidence(trails)):
        try:
            target = stored_path(survey.folder, file)
            source = stored_path(other, file)
            checked_ending(file)
        except (RecordError, InputError) as error:
            yield printable(file), str(error)
            continue
        if target.exists() or not source.exists():
            continue
        if held(other, file, sha256, size) != "ok":
            yield printable(file), "it is not what the trail says; it was not copied"
            continue
        target.parent.mkdir(exist_ok=True)
        _copy(source, target)
        yield printable(file), ""


def _named_evidence(trails: Mapping[Path, Trail]) -> set[tuple[str, str, int]]:
    return {
        (said.file, said.sha256, said.size)
        for trail in trails.values()
        for line in trail.lines
        if line.kind == "evidence" and (said := _as_evidence(line))
    }


def _as_evidence(line: Line) -> Evidence | None:
    try:
        said: Evidence = read_data(True, line.kind, line.data, keep_unknown=True)
    except InputError:
        return None
    return said


def _copy(source: Path, target: Path) -> None:
    with source.open("rb") as file:
        write_whole(target, lambda out: shutil.copyfileobj(file, out))


def _handbooks(
    survey: SurveyFolder, other: Path, trails: Mapping[Path, Trail]
) -> Iterator[tuple[str, str]]:
    folder = other / "handbooks"
    if folder.is_symlink():
        yield "handbooks", "it is a link; links are not followed"
        return
    own, theirs = contents(survey.handbooks), contents(folder)
    named = {line.data.get("handbook_sha256") for trail in trails.values() for line in trail.lines}
    for key, source in theirs.files.items():
        file = printable(f"handbooks/{source.name}")
        try:
            theirs_is = hash_in(source, folder)
            mine_is = hash_in(own.files[key], survey.handbooks) if key in own.files else None
        except HandbookError as error:
            yield file, error.what
            continue
        if mine_is == theirs_is:
            continue
        target = survey.handbooks / source.name
        if mine_is:
            yield file, f"the survey has another edition of {printable(key)}; it was not copied"
        elif target.exists() or target.is_symlink():
            yield file, "another file of the survey has this name; it was not copied"
        elif theirs_is not in named:
            yield file, "no line of the trails was chosen from this edition; it was not copied"
        else:
            survey.handbooks.mkdir(exist_ok=True)
            write_whole(target, source.read_bytes())
            yield file, ""
