"""Photos and documents of a reach: attached, captioned, listed, and looked after."""

from collections.abc import Iterable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder, said
from roughness.errors import InputError, UnknownNameError
from roughness.evidence.keeping import KeptFile, keep_copy
from roughness.evidence.metadata import Told, read_metadata
from roughness.evidence.naming import PHOTO_ENDINGS, checked_ending, ending_of, name_as_it_came
from roughness.evidence.opening import FORMATS, NOT_AN_IMAGE
from roughness.evidence.pictures import thumbnail
from roughness.evidence.sources import LARGEST_BYTES, opened_source
from roughness.quantities.foreign_text import nearest, printable, same_name_key
from roughness.quantities.printing import enumerate_words
from roughness.survey.words import FACTORS, USUAL_PARTS
from roughness.trail.lines import Line
from roughness.trail.review_state import Filed
from roughness.trail.state import ReachState


@dataclass(frozen=True, kw_only=True)
class Attached:
    """What came of attaching a file."""

    line: Line
    """The line of the reach's trail that names it."""
    is_new: bool
    """False where the reach had these bytes already."""
    tells: tuple[str, ...] = ()
    """What is good to know: it cannot be shown, the time is without its offset."""


def attach(
    pen: Recorder,
    reach: str,
    path: Path,
    *,
    caption: str | None = None,
    factors: Sequence[str] | None = None,
    part: str | None = None,
    condition: str | None = None,
    visit: str | None = None,
    with_position: bool = True,
    largest: int = LARGEST_BYTES,
) -> Attached:
    """Copy a file into the survey and name it in the reach's trail; the file is not touched.

    The same bytes again make no second copy: the new words replace the old ones, and what
    is not said this time stays.

    Parameters
    ----------
    pen : Recorder
        Who attaches it, and to which survey.
    reach : str
        The reach.
    path : Path
        A photo or document.
    caption, factors, part, condition, visit
        What it shows, which factors it supports, and what it belongs to; where nothing is
        said of the part or condition it belongs to the whole reach.
    with_position : bool
        Whether the place that the photo tells goes into the trail. The copy itself stays as
        it came, with all its metadata.
    largest : int
        The largest size in bytes.

    Raises
    ------
    InputError
        Where the file cannot be taken or a word is not known; nothing was written.
    RecordError
        Where the copy or the line could not be kept; no copy stays behind.
    """
    survey, noted = pen.survey, pen.survey.noted_reach(reach).reach
    words = {"caption": caption, "factors": factors, "part": part}
    words |= {"condition": condition, "visit": visit}
    known = _checked_words(survey, noted, words)
    refuse_unfit(path, largest)
    kept = keep_copy(survey.folder, path, largest)
    with _copy_goes_unless_named(survey, kept):
        told = _told(survey.folder / kept.file)
        before = _filed(survey.reach_state(noted), kept.sha256)
        data = said(before.evidence) | {"file": kept.file} if before else _of_file(kept, told)
        if not with_position:
            data["position"] = None
        data = _replaced(data, known)
        line = before.line if before else None
        if line is None or data != dict(line.data):
            line = pen.say_of_reach(noted, "evidence", data)
    tells = tuple(_tells(survey.folder / kept.file, told, with_position=with_position))
    return Attached(line=line, is_new=before is None, tells=tells)


def recaption(
    pen: Recorder,
    reach: str,
    sha256: str,
    *,
    caption: str | None = None,
    factors: Sequence[str] | None = None,
    part: str | None = None,
    condition: str | None = None,
    visit: str | None = None,
) -> Line:
    """Say anew what a piece of evidence shows; None leaves a word, an empty one takes it away.

    Raises
    ------
    InputError
        Where the reach has no such evidence or a word is not known.
    """
    noted = pen.survey.noted_reach(reach).reach
    filed = _filed(pen.survey.reach_state(noted), sha256)
    if filed is None:
        raise InputError(
            f"the reach {printable(noted)!r} has no evidence {printable(sha256[:12])}",
            wanted="attach the file first",
        )
    words = {"caption": caption, "factors": factors, "part": part}
    words |= {"condition": condition, "visit": visit}
    known = _checked_words(pen.survey, noted, words)
    return pen.say_of_reach(noted, "evidence", _replaced(said(filed.evidence), known))


def refuse_unfit(path: Path, largest: int = LARGEST_BYTES) -> None:
    """Refuse a file that cannot become evidence, before anything is copied.

    Raises
    ------
    InputError
        Where it is no plain file, empty, too large, of an ending that is not taken, or not
        the picture that its ending promises.
    """
    with opened_source(path, largest):
        ending = checked_ending(path.name)
    if ending in PHOTO_ENDINGS and read_metadata(path) is None:
        raise InputError(
            NOT_AN_IMAGE,
            where=name_as_it_came(path.name),
            wanted=f"{enumerate_words(FORMATS)} are pictures",
        )


def _told(path: Path) -> Told | None:
    return read_metadata(path) if ending_of(path.name) in PHOTO_ENDINGS else None


def _of_file(kept: KeptFile, told: Told | None) -> dict[str, Any]:
    """Return what is known of a file by itself."""
    return {
        "file": kept.file,
        "sha256": kept.sha256,
        "size": kept.size,
        "name": kept.name,
        "taken_at": told.taken_at if told else None,
        "position": list(told.position) if told and told.position else None,
    }


def _tells(path: Path, told: Told | None, *, with_position: bool) -> Iterator[str]:
    if told is None:
        yield "kept as a document: it is known by its hash and not shown here"
        return
    if told.taken_at is None:
        yield "the photo does not say when it was taken"
    elif len(told.taken_at) == len("2026-06-30T14:03:22"):
        yield "the photo tells the time without its offset from UTC; it is kept so"
    if told.position and not with_position:
        yield "its position is not in the trail, but still in the copy: that stays as it came"
    try:
        thumbnail(path, 64)
    except InputError as error:
        yield f"kept, but it cannot be shown: {error}"


def _filed(state: ReachState, sha256: str) -> Filed | None:
    return next((f for f in state.evidence if f.evidence.sha256 == sha256), None)


def _replaced(data: dict[str, Any], words: dict[str, Any]) -> dict[str, Any]:
    """Return the line with the words that were said; empty ones are left out."""
    merged = data | {key: value for key, value in words.items() if value is not None}
    return {key: value for key, value in merged.items() if value not in (None, "", [])}


@contextmanager
def _copy_goes_unless_named(survey: SurveyFolder, kept: KeptFile) -> Iterator[None]:
    """Take a new copy away again where the trail did not take the line that names it."""
    try:
        yield
    except BaseException:
        if kept.is_new:
            (survey.folder / kept.file).unlink(missing_ok=True)
        raise


def _checked_words(survey: SurveyFolder, reach: str, words: dict[str, Any]) -> dict[str, Any]:
    """Return the words as the survey writes them, or refuse the one that it does not know."""
    state = survey.reach_state(reach)
    parts = [p.part for p in state.parts] + [place.part for place in state.places.values()]
    conditions = [c.condition for c in survey.state.conditions]
    conditions += [place.condition for place in state.places.values()]
    known = {
        "part": [*parts, *USUAL_PARTS],
        "condition": conditions,
        "visit": [v.visit for v in state.visits],
    }
    checked: dict[str, Any] = {key: _known(key, words[key], names) for key, names in known.items()}
    if words["factors"] is not None:
        named = {_known("factor", word, FACTORS) for word in words["factors"]}
        checked["factors"] = [factor for factor in FACTORS if factor in named]
    if words["caption"] is not None:
        checked["caption"] = words["caption"].strip()
    return checked


def _known(what: str, name: str | None, names: Iterable[str]) -> str | None:
    if not name:
        return name
    by_key = {same_name_key(one): one for one in reversed([*names])}
    if same_name_key(name) in by_key:
        return by_key[same_name_key(name)]
    listed = [printable(one) for one in reversed(by_key.values())]
    few = f"known are {enumerate_words(listed)}" if listed else "there is none yet"
    hint = nearest(name, listed)
    raise UnknownNameError(
        f"the reach has no {what} {printable(name)!r}", wanted=f"{hint}? {few}" if hint else few
    )
