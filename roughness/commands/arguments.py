"""Arguments that are the same word for every verb."""

import argparse
import math
from pathlib import Path


def add_survey(parser: argparse.ArgumentParser) -> None:
    """Take the survey's folder."""
    parser.add_argument("survey", type=Path, metavar="SURVEY", help="the survey's folder")


def add_reach(parser: argparse.ArgumentParser) -> None:
    """Take the name of a reach."""
    parser.add_argument("reach", metavar="REACH", help="the reach, by its name")


def add_file(parser: argparse.ArgumentParser) -> None:
    """Take an input file."""
    parser.add_argument("file", metavar="FILE", help="the file to read; - is standard input")


def add_json(parser: argparse.ArgumentParser) -> None:
    """Take the wish for JSON."""
    parser.add_argument("--json", action="store_true", help="print JSON for a program to read")


def add_by(parser: argparse.ArgumentParser) -> None:
    """Take the author of what is recorded."""
    parser.add_argument("--by", metavar="NAME", help="who says so (else ROUGHNESS_BY, else known)")


def add_units(parser: argparse.ArgumentParser) -> None:
    """Take the units that lengths are shown in."""
    parser.add_argument(
        "--units", choices=("metric", "us"), help="units of lengths (else as they were recorded)"
    )


def add_handbooks(parser: argparse.ArgumentParser) -> None:
    """Take where further handbooks lie: a survey, or an agency's own file or folder."""
    places = parser.add_mutually_exclusive_group()
    places.add_argument(
        "--survey", type=Path, metavar="SURVEY", help="use the handbooks of this survey too"
    )
    places.add_argument(
        "--handbook",
        type=Path,
        metavar="FILE",
        help="use an agency's own handbook too: a .toml file, or a folder of them",
    )


def handbooks_of(args: argparse.Namespace) -> Path | None:
    """Return the folder with further handbooks that was named, if any.

    Raises
    ------
    InputError
        Where what was named is not there.
    """
    if args.survey is not None:
        from roughness.desk.folder import SurveyFolder

        return SurveyFolder(args.survey).handbooks
    named: Path | None = args.handbook
    if named is None or named.is_dir():
        return named
    if not named.is_file():
        from roughness.errors import InputError
        from roughness.quantities.foreign_text import printable

        raise InputError(
            "there is no such file or folder",
            where=printable(str(named)),
            wanted="an agency's own handbook, a .toml file; a key stands in the estimate itself",
        )
    return named.parent


def number(text: str) -> float:
    """Read a number from the command line; NaN, infinity and a decimal comma are refused."""
    try:
        value = float(text)
    except ValueError:
        point = text.replace(",", ".")
        hint = f", write {point}" if text.count(",") == 1 and _is_number(point) else ""
        raise argparse.ArgumentTypeError(f"{text!r} is no number{hint}") from None
    if not math.isfinite(value):
        raise argparse.ArgumentTypeError(f"{text!r} is no number; leave unknown values out")
    return value


def _is_number(text: str) -> bool:
    try:
        float(text)
    except ValueError:
        return False
    return True
