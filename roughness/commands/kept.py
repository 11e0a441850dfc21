"""What a command that wrote a line says about it."""

import sys
from typing import Any

from roughness.commands.plain_tables import wrapped
from roughness.desk.recording import Recorder
from roughness.quantities.foreign_text import printable
from roughness.trail.lines import Line
from roughness.trail.telling import describe_line


def kept_lines(reach: str, line: Line) -> list[str]:
    """Say that a line of a reach's trail is kept, and what it says."""
    where = f"{printable(reach)}, line {line.number} ({line.hash[:12]})"
    return wrapped(f"kept for {where}: {describe_line(line)}", rest="  ")


def kept_document(reach: str, line: Line) -> dict[str, Any]:
    """Return the same for a program."""
    return {
        "reach": reach,
        "part": line.data["part"],
        "condition": line.data["condition"],
        "line": line.hash,
        "by": line.by,
        "at": line.at,
    }


def say_repairs(pen: Recorder) -> None:
    """Say on standard error what happened to the files beside what was asked for."""
    if pen.repaired:
        print(
            "the last line of the trail was cut off; the rest was moved to a .torn file beside it",
            file=sys.stderr,
        )
    if pen.unlocked:
        print(
            "this file system has no locks: let one person write at a time",
            file=sys.stderr,
        )
