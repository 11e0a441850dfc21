"""A sheet for each reach to take along: what to look at, note and photograph, and the grades."""

import argparse
from pathlib import Path

from roughness.commands import DONE
from roughness.commands.arguments import add_survey
from roughness.commands.results import print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    parser.add_argument("-o", dest="target", type=Path, required=True, metavar="FILE.html")
    parser.add_argument(
        "--with-ranges",
        action="store_true",
        help="print published ranges of n beside the grades (who sees them judges towards them)",
    )


def run(args: argparse.Namespace) -> int:
    """Write the sheets; nothing in the survey is changed."""
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.whole_files import write_whole
    from roughness.quantities.foreign_text import printable
    from roughness.reports.field_sheet import field_sheet
    from roughness.reports.pages import refuse_target

    survey = SurveyFolder(args.survey)
    refuse_target(args.target, survey.folder)
    write_whole(args.target, field_sheet(survey, with_ranges=args.with_ranges))
    print_lines([printable(str(args.target))])
    return DONE
