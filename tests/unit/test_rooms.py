"""The rooms of the package and the arrows between them, held by a machine."""

import ast
import importlib
import subprocess
import sys
from pathlib import Path

import pytest

import roughness

PACKAGE = Path(roughness.__file__).parent

# From the top; rooms on one line do not see each other. A line may import only lines below.
FLOORS: tuple[tuple[str, ...], ...] = (
    ("__main__",),
    ("screens", "commands"),
    ("reports", "exports", "batches"),
    ("desk",),
    ("assessment",),
    ("reasoning",),
    ("findings",),
    ("comparison", "additive"),
    ("custody", "evidence", "shelf"),
    ("trail",),
    ("handbook", "hydraulics"),
    ("survey",),
    ("quantities",),
    ("errors",),
)
LEVEL = {room: level for level, floor in enumerate(FLOORS) for room in floor}
PURE: tuple[str, ...] = (
    "assessment",
    "reasoning",
    "findings",
    "comparison",
    "additive",
    "handbook",
    "hydraulics",
)
PURE += ("survey", "quantities", "errors")
IMPURE = {"os", "io", "pathlib", "time", "datetime", "random", "subprocess", "socket", "tempfile"}
FILES = sorted(PACKAGE.rglob("*.py"))


def room_of(file: Path) -> str:
    return file.relative_to(PACKAGE).with_suffix("").parts[0]


def imported(file: Path) -> set[str]:
    names: set[str] = set()
    for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names.update(alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.module:
            names.update(f"{node.module}.{alias.name}" for alias in node.names)
    return names


def rooms_imported(file: Path) -> set[str]:
    parts = [name.split(".") for name in imported(file) if name.startswith("roughness.")]
    return {part[1] for part in parts if part[1] in LEVEL}


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(PACKAGE)))
def test_a_room_imports_only_rooms_below_it(file: Path) -> None:
    room = room_of(file)
    if room == "__init__":
        return
    assert room in LEVEL, f"{room} has no place among the rooms"
    wrong = {r for r in rooms_imported(file) if r != room and LEVEL[r] <= LEVEL[room]}
    assert not wrong


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(PACKAGE)))
def test_only_the_screens_know_textual_and_pure_rooms_know_no_files(file: Path) -> None:
    room, names = room_of(file), {name.split(".")[0] for name in imported(file)}
    if room not in ("screens",):
        assert not names & {"textual", "rich"}
    if room in PURE:
        assert not names & IMPURE


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(PACKAGE)))
def test_no_file_outgrows_a_reader(file: Path) -> None:
    assert len(file.read_text(encoding="utf-8").splitlines()) <= 400
    assert file.stem not in {"utils", "helpers", "common", "base", "manager"}


def test_public_names_are_no_rooms_and_work_after_every_room_was_imported() -> None:
    rooms = {room_of(file) for file in FILES} - {"__init__", "__main__"}
    for file in FILES:
        if file.stem != "__main__":
            parts = file.relative_to(PACKAGE.parent).with_suffix("").parts
            importlib.import_module(".".join(p for p in parts if p != "__init__"))
    assert not rooms & set(roughness.__all__)
    assert roughness.load_handbook("cowan-1956").key == "cowan-1956"
    assert callable(roughness.estimate)


@pytest.mark.parametrize("words", [["--version"], ["--help"], ["list", "--help"]])
def test_starting_loads_neither_screens_nor_arithmetic(words: list[str]) -> None:
    code = (
        "import sys; from roughness.__main__ import main; main(sys.argv[1:]);"
        "print([m for m in ('textual', 'rich', 'numpy', 'pydantic') if m in sys.modules])"
    )
    run = subprocess.run(
        [sys.executable, "-c", code, *words], capture_output=True, text=True, check=True
    )
    assert run.stdout.splitlines()[-1] == "[]"
