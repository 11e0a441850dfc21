"""New surveys: empty, from a list of reaches, or a copy of the demo survey."""

import secrets
import shutil
import stat
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path

from roughness.desk.folder import USUAL_HANDBOOK, SurveyFolder
from roughness.desk.recording import Recorder, now
from roughness.errors import InputError, NotKeptError
from roughness.quantities.foreign_text import checked_name, printable
from roughness.shelf.handbooks import load_handbook
from roughness.shelf.places import demo_folder
from roughness.survey.stream import Reach
from roughness.trail.locking import LOCK_FILE, SurveyLock
from roughness.trail.naming import survey_trail
from roughness.trail.writing import begin

# Trails are compared byte by byte; two that grew apart are united line by line.
_GIT_ATTRIBUTES = "* -text\n*.jsonl merge=union\n"
_FOLDERS = ("reaches", "evidence", "handbooks")


def new_survey(
    folder: Path,
    by: str,
    *,
    name: str | None = None,
    stream: str | None = None,
    handbook: str = USUAL_HANDBOOK,
    reaches: Sequence[Reach] = (),
) -> SurveyFolder:
    """Make a survey in ``folder``, which must be empty or not there yet.

    Raises
    ------
    InputError
        Where the folder holds something, a name does not fit or the handbook is not known.
    NotKeptError
        Where the disk did not take it.

    Whatever goes wrong, what was made until then is taken away again.
    """
    load_handbook(handbook)
    name = checked_name(folder.resolve().name if name is None else name, "name of the survey")
    if stream is not None:
        stream = checked_name(stream, "name of the stream")
    with _whole_or_nothing(folder):
        return _filled(folder, by, name, stream, handbook, reaches)


def _filled(
    folder: Path,
    by: str,
    name: str,
    stream: str | None,
    handbook: str,
    reaches: Sequence[Reach],
) -> SurveyFolder:
    for inside in _FOLDERS:
        (folder / inside).mkdir()
    (folder / ".gitattributes").write_text(_GIT_ATTRIBUTES, encoding="utf-8", newline="\n")
    first = {"format": 1, "survey": secrets.token_hex(16), "name": name}
    begin(survey_trail(folder), first, by=by, at=now(), lock=SurveyLock(folder))
    survey = SurveyFolder(folder)
    pen = Recorder(survey, by)
    pen.describe(**({"stream": stream} if stream else {}), handbook=handbook)
    pen.add_reaches(reaches)
    return survey


def copy_demo(folder: Path) -> SurveyFolder:
    """Copy the invented demo survey to ``folder``, which must be empty or not there yet.

    Raises
    ------
    InputError
        Where the folder holds something.
    """
    with _whole_or_nothing(folder):
        _copy_to_write_in(demo_folder(), folder)
        return SurveyFolder(folder)


def _copy_to_write_in(survey: Path, folder: Path) -> None:
    """Copy the bytes alone: an installed survey may be read-only, and a lock is its owner's."""
    shutil.copytree(
        survey,
        folder,
        copy_function=shutil.copyfile,
        ignore=shutil.ignore_patterns(LOCK_FILE),
        dirs_exist_ok=True,
    )
    for inside in (folder, *folder.rglob("*")):
        if inside.is_dir():
            inside.chmod(inside.stat().st_mode | stat.S_IRWXU)
    # Neither git nor a wheel keeps an empty folder.
    for name in _FOLDERS:
        (folder / name).mkdir(exist_ok=True)


@contextmanager
def _whole_or_nothing(folder: Path) -> Iterator[None]:
    """Make ``folder`` where it is not there; whatever goes wrong, leave what was there before."""
    _refuse_full(folder)
    made_here = [path for path in (folder, *folder.parents) if not path.exists()]
    try:
        folder.mkdir(parents=True, exist_ok=True)
        yield
    except BaseException as error:
        if made_here:
            shutil.rmtree(made_here[-1], ignore_errors=True)
        else:
            _empty(folder)
        if isinstance(error, OSError):
            raise NotKeptError(
                f"{printable(str(folder))}: {_why(error)}; nothing was made"
            ) from None
        raise


def _why(error: OSError) -> str:
    """Say why; a copy of many files tells of each, and the first one stands for all."""
    if isinstance(error, shutil.Error) and isinstance(error.args[0], list):
        return printable(str(error.args[0][0][-1]))
    return error.strerror or str(error)


def _empty(folder: Path) -> None:
    for inside in folder.iterdir():
        if inside.is_dir():
            shutil.rmtree(inside, ignore_errors=True)
        else:
            inside.unlink(missing_ok=True)


def _refuse_full(folder: Path) -> None:
    if folder.is_symlink() or (folder.exists() and not folder.is_dir()):
        raise InputError("it is no folder", where=printable(str(folder)), wanted="name a new one")
    if folder.exists() and any(folder.iterdir()):
        raise InputError(
            "the folder is not empty", where=printable(str(folder)), wanted="name a new one"
        )
