"""Who is at the keyboard, and which surveys this person had open: the tool's small memory.

It lies in the user's own configuration folder and never in a survey. Losing it loses
nothing: a name is asked for again, a survey is opened by its path.
"""

import json
import os
from contextlib import suppress
from pathlib import Path
from typing import Any

from platformdirs import user_config_path

from roughness.errors import InputError
from roughness.quantities.foreign_text import checked_name

VARIABLE = "ROUGHNESS_BY"
NOBODY = "nobody named"
"""Stands for the author of a survey that was made where nobody was known."""
KEY_VARIABLE = "ROUGHNESS_SIGNING_KEY"
ALLOWED_VARIABLE = "ROUGHNESS_ALLOWED_SIGNERS"
_MOST_RECENT = 12


def who(by: str | None = None) -> str:
    """Return who says what is recorded now: the option, the environment, or what was told once.

    Raises
    ------
    InputError
        Where nobody is known, or the name is none.
    """
    name = (os.environ.get(VARIABLE) or _memory().get("by")) if by is None else by
    if not isinstance(name, str) or not name.strip():
        raise InputError(
            "nobody is named as the author", wanted=f"give --by NAME or set {VARIABLE}"
        )
    return checked_name(name, "name of the author")


def known_person(by: str | None = None) -> str | None:
    """Return the same, or None where nobody is known yet."""
    try:
        return who(by)
    except InputError:
        return None


def remember_person(name: str) -> None:
    """Keep the name for the next start."""
    _remember(by=checked_name(name, "name of the author"))


def recent_surveys() -> list[Path]:
    """Return the surveys that were open last and are still there, the latest first."""
    listed = _memory().get("recent", [])
    paths = [Path(path) for path in listed if isinstance(path, str)]
    return [path for path in paths if (path / "survey.jsonl").is_file()]


def remember_survey(folder: Path) -> None:
    """Put a survey at the top of the recent ones."""
    path = str(folder.resolve())
    others = [str(other) for other in recent_surveys() if str(other) != path]
    _remember(recent=[path, *others][:_MOST_RECENT])


def signing_key() -> Path | None:
    """Return the key that this person signs with: the environment, or ``signing_key`` as kept.

    Whether it can be used is seen when it signs.
    """
    path = os.environ.get(KEY_VARIABLE) or _memory().get("signing_key")
    return Path(path) if isinstance(path, str) and path.strip() else None


def allowed_signers() -> Path:
    """Return where this person lists whose keys count; the file need not be there.

    Never in a survey: whoever can edit a survey could add a key to it.
    """
    named = os.environ.get(ALLOWED_VARIABLE)
    return Path(named) if named else _folder() / "allowed_signers"


def _folder() -> Path:
    return user_config_path("roughness", appauthor=False)


def _file() -> Path:
    return _folder() / "memory.json"


def _memory() -> dict[str, Any]:
    try:
        found = json.loads(_file().read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return {}
    return found if isinstance(found, dict) else {}


def _remember(**news: Any) -> None:
    # A read-only home is no reason to stop: the name is asked for again next time.
    with suppress(OSError):
        file = _file()
        file.parent.mkdir(parents=True, exist_ok=True)
        new = file.with_suffix(".new")
        new.write_text(json.dumps(_memory() | news, ensure_ascii=False), encoding="utf-8")
        new.replace(file)
