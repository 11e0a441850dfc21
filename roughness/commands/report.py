"""The report of a survey: one page with every n and the reasons for it, to read and to print."""

import argparse
import sys
from pathlib import Path

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_by, add_survey
from roughness.commands.results import print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    parser.add_argument("-o", dest="target", type=Path, required=True, metavar="FILE.html")
    parser.add_argument(
        "--without-position",
        action="store_true",
        help="leave out where reaches and photos lie",
    )
    add_by(parser)


def run(args: argparse.Namespace) -> int:
    """Write the report; 1 where a ``stop`` finding stands in it."""
    from roughness.commands.noting import note_heads
    from roughness.commands.survey_faults import say_faults
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.rows import rows
    from roughness.desk.whole_files import write_whole
    from roughness.quantities.foreign_text import printable
    from roughness.reasoning.cautions import IN_ONE_LINE
    from roughness.reports.pages import refuse_target
    from roughness.reports.survey_report import survey_report

    survey = SurveyFolder(args.survey)
    refuse_target(args.target, survey.folder)
    found = rows(survey)
    write_whole(args.target, survey_report(survey, found, with_position=not args.without_position))
    print_lines([printable(str(args.target))])
    note_heads(survey, args.by, "report")
    print(IN_ONE_LINE, file=sys.stderr)
    broken = say_faults(survey)
    return STANDS_STOPPED if broken or any(row.stands_stopped for row in found) else DONE
