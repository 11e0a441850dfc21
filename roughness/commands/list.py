"""Reaches with n, range, status and open findings."""

import argparse
import sys

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_json, add_survey, add_units
from roughness.commands.results import print_json, print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_json(parser)
    add_units(parser)


def run(args: argparse.Namespace) -> int:
    """Print the table; 1 where a ``stop`` finding stands."""
    from roughness.commands.documents import listed
    from roughness.commands.survey_faults import say_faults
    from roughness.commands.survey_table import survey_lines
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.rows import rows
    from roughness.reasoning.cautions import IN_ONE_LINE

    survey = SurveyFolder(args.survey)
    found = rows(survey)
    if args.json:
        print_json([listed(row) for row in found])
    else:
        print_lines(survey_lines(survey, found, args.units))
        print(IN_ONE_LINE, file=sys.stderr)
    broken = say_faults(survey)
    return STANDS_STOPPED if broken or any(row.stands_stopped for row in found) else DONE
