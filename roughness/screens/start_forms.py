"""The forms of the start screen: a name, a copy of the demo, a new survey, a folder."""

from collections.abc import Mapping
from pathlib import Path
from typing import Final

from roughness.desk.folder import USUAL_HANDBOOK, SurveyFolder
from roughness.desk.identity import remember_person
from roughness.desk.making import copy_demo, new_survey
from roughness.errors import InputError, RecordError
from roughness.quantities.foreign_text import checked_name, printable, same_name_key
from roughness.screens.form import Field, Form
from roughness.screens.survey_forms import reaches_in
from roughness.screens.typed import text_or_none
from roughness.shelf.handbooks import handbook_keys
from roughness.survey.stream import Reach

_USUAL_DEMO: Final = "./roughness-demo"


def person_form() -> Form[str]:
    """Ask who is at the keyboard; the name is remembered."""

    def take(typed: Mapping[str, str]) -> str:
        name = checked_name(typed["name"], "name of the author")
        remember_person(name)
        return name

    return Form(
        "Who is at the keyboard?",
        [Field(key="name", label="Your name", hint="as it shall stand in the record")],
        take,
        says="Asked once. Every choice is kept with the name of who made it.",
    )


def demo_form() -> Form[Path]:
    """Ask where the copy of the demo survey goes."""

    def take(typed: Mapping[str, str]) -> Path:
        folder = _folder_in(typed["folder"])
        if not (folder / "survey.jsonl").is_file():
            copy_demo(folder)
        return folder

    return Form(
        "A copy of the demo survey",
        [Field(key="folder", label="Folder", value=_USUAL_DEMO)],
        take,
        says="The stream is invented. You work on a copy of your own; change what you like.",
        does="copy and open it",
    )


def folder_form() -> Form[Path]:
    """Ask for the folder of a survey."""

    def take(typed: Mapping[str, str]) -> Path:
        return SurveyFolder(_folder_in(typed["folder"])).folder

    return Form(
        "Open a survey",
        [Field(key="folder", label="Folder", hint="the one that holds survey.jsonl")],
        take,
        does="open it",
    )


def new_form(by: str, folder: str = "") -> Form[Path]:
    """Ask for what a new survey needs, and make it."""

    def take(typed: Mapping[str, str]) -> Path:
        where = _folder_in(typed["folder"])
        file = text_or_none(typed["file"])
        new_survey(
            where,
            by,
            name=text_or_none(typed["name"]),
            stream=text_or_none(typed["stream"]),
            handbook=typed["handbook"],
            reaches=[*(reaches_in(file) if file else ()), *_typed_reaches(typed["reaches"])],
        )
        return where

    return Form(
        "New survey",
        [
            Field(key="folder", label="Folder", value=folder, hint="new or empty: ./alder-2026"),
            Field(key="name", label="Name", hint="the folder's name where left empty"),
            Field(key="stream", label="Stream", hint="such as: Alder brook"),
            Field(key="handbook", label="Handbook", value=USUAL_HANDBOOK, choices=handbook_keys()),
            Field(
                key="file", label="Reaches, from file", hint="CSV or GeoJSON, or type them below"
            ),
            Field(
                key="reaches",
                label="Reaches, typed",
                hint="one name a line, from upstream to downstream",
                many_lines=True,
            ),
        ],
        take,
        does="make the survey",
        slow=True,
    )


def not_a_survey(folder: Path, why: str) -> RecordError:
    """Return the error that says why a folder cannot be opened as a survey."""
    return RecordError(f"{printable(str(folder))} cannot be opened as a survey: {why}")


def _folder_in(typed: str) -> Path:
    if not typed.strip():
        raise InputError("the folder is missing", wanted="type a name such as ./alder-2026")
    return Path(typed.strip()).expanduser()


def _typed_reaches(typed: str) -> list[Reach]:
    names = [checked_name(line, "reach name") for line in typed.splitlines() if line.strip()]
    seen: dict[str, str] = {}
    for name in names:
        if seen.setdefault(same_name_key(name), name) != name or names.count(name) > 1:
            raise InputError(f"the reach {name!r} stands there twice", wanted="rename one")
    return [Reach(reach=name) for name in names]
