"""The JSON Schema of an input or output."""

import argparse

from roughness.commands import DONE
from roughness.commands.results import print_json

NAMES = (
    "estimate",
    "estimate-output",
    "section",
    "section-output",
    "crosscheck",
    "crosscheck-output",
    "backcalc",
    "backcalc-output",
    "trail",
    "list",
    "check",
    "export",
    "handbook",
    "measured-streams",
    "findings",
)


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    parser.add_argument("name", metavar="NAME", help=f"one of {', '.join(NAMES)}")
    parser.add_argument("--json", action="store_true", help="as always: the result is JSON")


def run(args: argparse.Namespace) -> int:
    """Print the schema."""
    if args.name not in NAMES:
        _refuse(args.name)
    from roughness.commands.schemas import SCHEMAS

    print_json(SCHEMAS[args.name]())
    return DONE


def _refuse(name: str) -> None:
    from roughness.errors import UnknownNameError
    from roughness.quantities.foreign_text import nearest, printable

    hint, known = nearest(name, NAMES), f"known are {', '.join(NAMES)}"
    raise UnknownNameError(
        f"no schema is named {printable(name)!r}", wanted=f"{hint}? {known}" if hint else known
    )
