"""The forms of the evidence: a file to attach, what it shows, a folder to watch."""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from roughness.desk.attaching import Attached, attach, recaption
from roughness.desk.evidence_lists import Item
from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder
from roughness.errors import InputError
from roughness.evidence.naming import name_as_it_came
from roughness.quantities.foreign_text import printable
from roughness.screens.evidence_drop import DropFolder
from roughness.screens.form import Field, Form
from roughness.screens.typed import text_or_none
from roughness.survey.words import FACTORS, Factor

_WHOLE: Final = "the whole reach"
_ANY: Final = "any"
_KEPT, _LEFT_OUT = "into the record", "left out of it"
_OFFER, _PASS = "offer it too", "pass it over"


@dataclass(frozen=True, kw_only=True)
class About:
    """What the evidence at hand is about, as far as the screen knows."""

    reach: str
    part: str | None = None
    condition: str | None = None
    factor: Factor | None = None


def attach_form(pen: Recorder, about: About, offered: Path | None = None) -> Form[Attached]:
    """Ask for a file, unless one is offered, and for what it shows; then attach it.

    Copying may last, so it runs aside, with a reader and writer of its own.
    """
    known = About(reach=about.reach, part=about.part, condition=about.condition)
    factors = about.factor or ""

    def take(typed: Mapping[str, str]) -> Attached:
        aside = Recorder(SurveyFolder(pen.survey.folder), pen.by)
        return attach(
            aside,
            about.reach,
            offered or path_in(typed["file"]),
            caption=text_or_none(typed["caption"]),
            factors=factors_in(typed["factors"]) or None,
            part=None if typed["part"] == _WHOLE else typed["part"],
            condition=None if typed["condition"] == _ANY else typed["condition"],
            with_position=typed["position"] == _KEPT,
        )

    file = Field(key="file", label="File", hint="its path; dragging it into the terminal types it")
    position = Field(key="position", label="Its own position", choices=(_KEPT, _LEFT_OUT))
    name = name_as_it_came(offered.name) if offered else ""
    return Form(
        f"New in the folder: {name}" if offered else f"Attach to {printable(about.reach)}",
        [*([] if offered else [file]), *_words(pen.survey, known, "", factors), position],
        take,
        says=f"To {printable(about.reach)}. Esc leaves it where it is." if offered else _COPIED,
        does="attach it",
        slow=True,
    )


_COPIED: Final = "The file is copied into the survey as it is; the file itself is not touched."


def caption_form(pen: Recorder, reach: str, item: Item) -> Form[bool]:
    """Ask anew what a photo or document shows."""
    evidence = item.evidence
    about = About(reach=reach, part=evidence.part, condition=evidence.condition)

    def take(typed: Mapping[str, str]) -> bool:
        recaption(
            pen,
            reach,
            evidence.sha256,
            caption=typed["caption"].strip(),
            factors=factors_in(typed["factors"]),
            part="" if typed["part"] == _WHOLE else typed["part"],
            condition="" if typed["condition"] == _ANY else typed["condition"],
        )
        return True

    factors = ", ".join(evidence.factors or ())
    return Form(
        f"What {printable(evidence.name)} shows",
        _words(pen.survey, about, evidence.caption or "", factors),
        take,
        does="keep it",
    )


def drop_form(survey: Path, drop: DropFolder) -> Form[bool]:
    """Ask for the folder to watch."""

    def take(typed: Mapping[str, str]) -> bool:
        folder = path_in(typed["folder"])
        drop.watch(folder, survey, only_new=typed["there"] == _PASS)
        return True

    return Form(
        "Watch a folder",
        [
            Field(key="folder", label="Folder", value=str(survey.resolve().parent / "drop")),
            Field(key="there", label="What lies there now", choices=(_OFFER, _PASS)),
        ],
        take,
        says="A file that stood still in it for 2 seconds is offered here, and attached only"
        " when you take it. Nothing in the folder is moved or removed.",
        does="watch it",
    )


def factors_in(text: str) -> list[str]:
    """Read factors that are divided by commas or blanks; their first letters are enough.

    What is no factor is returned as it is typed: whoever attaches it says what would be.

    >>> factors_in("veg, base")
    ['vegetation', 'base']
    """
    return [_factor(word) for word in re.split(r"[\s,;]+", text.strip()) if word]


def path_in(text: str) -> Path:
    """Read a path as people type it, or as a terminal types a file that is dragged into it.

    Raises
    ------
    InputError
        Where nothing was typed.
    """
    typed = text.strip()
    if len(typed) > 1 and typed[0] == typed[-1] and typed[0] in "'\"":
        typed = typed[1:-1]
    elif "\\ " in typed and not Path(typed).exists():
        typed = re.sub(r"\\(.)", r"\1", typed)
    if not typed:
        raise InputError("no path was typed", wanted="such as photos/bend.jpg")
    try:
        return Path(typed).expanduser()
    except RuntimeError:  # ~somebody who is not known on this machine
        return Path(typed)


def _factor(word: str) -> str:
    like = [factor for factor in FACTORS if factor.startswith(word.lower())]
    return like[0] if len(like) == 1 else word


def _words(survey: SurveyFolder, about: About, caption: str, factors: str) -> list[Field]:
    parts = [part.part for part in survey.reach_state(about.reach).parts]
    conditions = [condition.condition for condition in survey.state.conditions]
    return [
        Field(key="caption", label="Caption", value=caption, hint="what it shows"),
        Field(
            key="factors",
            label="Factors it supports",
            value=factors,
            hint="such as: base, vegetation; empty: any",
        ),
        _pick("part", "Belongs to", _WHOLE, parts, about.part),
        _pick("condition", "Flow condition", _ANY, conditions, about.condition),
    ]


def _pick(key: str, label: str, open_word: str, known: list[str], now: str | None) -> Field:
    names = [*known, *([now] if now and now not in known else [])]
    return Field(key=key, label=label, value=now or open_word, choices=(open_word, *names))
