"""A copy of the invented demo survey, opened (its n table where there is no terminal)."""

import argparse
import sys
from pathlib import Path

from roughness.commands import DONE, Screens, at_a_terminal
from roughness.commands.results import print_lines

USUAL_FOLDER = Path("roughness-demo")
_INVENTED = "The demo survey is invented: no such stream, no such people."


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    parser.add_argument(
        "folder",
        nargs="?",
        type=Path,
        metavar="FOLDER",
        help=f"where the copy goes (else {USUAL_FOLDER} here)",
    )


def run(args: argparse.Namespace) -> int | Screens:
    """Copy the survey where it is not there yet, and open it."""
    from roughness.quantities.foreign_text import printable

    folder: Path = args.folder or USUAL_FOLDER
    # Only the usual place is opened again; a folder that was named must be empty.
    if args.folder is None and (folder / "survey.jsonl").is_file():
        said = f"{printable(str(folder))} holds a survey already; it is used as it is"
    else:
        from roughness.desk.making import copy_demo

        copy_demo(folder)
        said = f"copied to {printable(str(folder))}"
    print(said, file=sys.stderr)
    if at_a_terminal():
        return Screens(folder, demo=True)
    _print_table(folder)
    return DONE


def _print_table(folder: Path) -> None:
    from roughness.commands.survey_table import survey_lines
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.rows import rows
    from roughness.reasoning.cautions import IN_ONE_LINE

    survey = SurveyFolder(folder)
    print_lines([*survey_lines(survey, rows(survey)), _INVENTED])
    print(IN_ONE_LINE, file=sys.stderr)
