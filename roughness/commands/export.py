"""The table of n for a model: .csv (with a schema beside it) or .json, by the ending."""

import argparse
import sys
from pathlib import Path

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_by, add_survey
from roughness.commands.results import print_lines

ACCEPTED = "accepted"
# All that a row can be; the words stand in `status`.
STATUSES = (
    "unvisited",
    "incomplete",
    "estimated",
    "in review",
    "returned",
    ACCEPTED,
    "changed since acceptance",
)


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    parser.add_argument("-o", dest="target", type=Path, required=True, metavar="FILE")
    parser.add_argument("--status", choices=STATUSES, help="only the rows of this status")
    add_by(parser)


def run(args: argparse.Namespace) -> int:
    """Write the table; 1 where a ``stop`` finding stands in one of its rows."""
    from roughness.commands.noting import note_heads
    from roughness.commands.survey_faults import say_faults
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.rows import rows
    from roughness.exports.table import table_of
    from roughness.exports.writing import refuse_target, write_table
    from roughness.quantities.foreign_text import printable
    from roughness.reasoning.cautions import IN_ONE_LINE

    survey = SurveyFolder(args.survey)
    refuse_target(args.target, survey.folder)
    found = [row for row in rows(survey) if args.status in (None, row.status)]
    written = write_table(table_of(survey, found), args.target)
    print_lines(printable(str(file)) for file in written)
    open_rows = sum(row.status != ACCEPTED for row in found)
    if open_rows:
        print(f"{open_rows} of {len(found)} rows are not accepted", file=sys.stderr)
    note_heads(survey, args.by, "export")
    print(IN_ONE_LINE, file=sys.stderr)
    broken = say_faults(survey)
    return STANDS_STOPPED if broken or any(row.stands_stopped for row in found) else DONE
