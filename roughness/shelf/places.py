"""Where the tables and the demo survey lie: inside the installed package or beside it."""

from pathlib import Path

from roughness.errors import RoughnessError

_INSIDE = Path(__file__).parent
# In a checkout, and in an editable install of one, both lie at the top of the repository.
_TOP = _INSIDE.parents[1]


def tables_folder() -> Path:
    """Return the folder of the shipped handbooks.

    Raises
    ------
    RoughnessError
        Where the installation is incomplete.
    """
    return _shipped("tables", "editions.txt")


def demo_folder() -> Path:
    """Return the folder of the demo survey, which is to be copied and never written to.

    Raises
    ------
    RoughnessError
        Where the installation is incomplete.
    """
    return _shipped("demo_reaches", "survey.jsonl")


def _shipped(name: str, holds: str) -> Path:
    for folder in (_INSIDE / name, _TOP / name):
        if (folder / holds).is_file():
            return folder
    raise RoughnessError(
        f"the folder {name} that belongs to the program is missing (looked in {_INSIDE} and "
        f"{_TOP}); install roughness again"
    )
