"""One reach's reasoning: values, reasons, findings, and what is missing."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_json, add_reach, add_survey, add_units
from roughness.commands.results import print_json, print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_reach(parser)
    parser.add_argument("--trail", action="store_true", help="every line that was recorded too")
    add_json(parser)
    add_units(parser)


def run(args: argparse.Namespace) -> int:
    """Print the reach; 1 where a ``stop`` finding stands."""
    from roughness.commands.reach_text import reach_document, reach_lines
    from roughness.commands.survey_faults import say_faults
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.rows import rows

    survey = SurveyFolder(args.survey)
    name = survey.noted_reach(args.reach).reach
    found = [row for row in rows(survey) if row.reach.reach == name]
    if args.json:
        print_json(reach_document(survey, name, found, with_trail=args.trail))
    else:
        print_lines(reach_lines(survey, name, found, args.units, with_trail=args.trail))
    broken = say_faults(survey)
    return STANDS_STOPPED if broken or any(row.stands_stopped for row in found) else DONE
