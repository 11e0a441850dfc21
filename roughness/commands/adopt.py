"""Let another n than the estimate go to the model, with a reason."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_by, add_json, add_reach, add_survey, number
from roughness.commands.results import print_json, print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_reach(parser)
    parser.add_argument("--part", required=True, metavar="P", help="part of the cross-section")
    parser.add_argument("--condition", required=True, metavar="C", help="flow condition")
    parser.add_argument("--n", required=True, type=number, metavar="N", help="the n to adopt")
    parser.add_argument("--low", type=number, metavar="L", help="its lower limit")
    parser.add_argument("--high", type=number, metavar="H", help="its upper limit")
    parser.add_argument("--reason", required=True, metavar="TEXT", help="why")
    add_by(parser)
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Record one line and say what was kept; 1 where a ``stop`` finding stands."""
    from roughness.commands.kept import kept_document, kept_lines, say_repairs
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.identity import who
    from roughness.desk.recording import Recorder
    from roughness.desk.rows import rows_of_reach

    survey = SurveyFolder(args.survey)
    pen = Recorder(survey, who(args.by))
    reach = survey.noted_reach(args.reach).reach
    line = pen.adopt(
        reach,
        args.part,
        args.condition,
        args.n,
        low=args.low,
        high=args.high,
        reason=args.reason,
    )
    say_repairs(pen)
    if args.json:
        print_json(kept_document(reach, line) | {"n": args.n, "low": args.low, "high": args.high})
    else:
        print_lines(kept_lines(reach, line))
    place = line.data["part"], line.data["condition"]
    stopped = any(
        row.stands_stopped
        for row in rows_of_reach(survey, reach)
        if row.part and row.condition and (row.part.part, row.condition.condition) == place
    )
    return STANDS_STOPPED if stopped else DONE
