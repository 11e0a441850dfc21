"""Attach photos or documents to a reach: copied into the survey, known by their hash."""

import argparse
from pathlib import Path
from typing import TYPE_CHECKING, Any

from roughness.commands import DONE
from roughness.commands.arguments import add_by, add_json, add_reach, add_survey
from roughness.commands.results import print_json, print_lines

if TYPE_CHECKING:
    from roughness.desk.attaching import Attached


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_reach(parser)
    parser.add_argument("files", nargs="+", type=Path, metavar="FILE", help="a photo or document")
    parser.add_argument("--caption", metavar="TEXT", help="what is to be seen")
    parser.add_argument(
        "--factor",
        action="append",
        dest="factors",
        metavar="FACTOR",
        help="a factor that it supports; may be given several times",
    )
    parser.add_argument("--part", metavar="P", help="the part it shows (else the whole reach)")
    parser.add_argument("--condition", metavar="C", help="the flow condition it is about")
    parser.add_argument("--visit", metavar="V", help="the visit it was taken on")
    parser.add_argument(
        "--without-position",
        action="store_true",
        help="leave the photo's position out of the trail; the copy keeps it",
    )
    add_by(parser)
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Check all files, then copy each and write a line for it."""
    from roughness.commands.kept import kept_lines, say_repairs
    from roughness.desk.attaching import attach, refuse_unfit
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.identity import who
    from roughness.desk.recording import Recorder

    survey = SurveyFolder(args.survey)
    pen = Recorder(survey, who(args.by))
    reach = survey.noted_reach(args.reach).reach
    for path in args.files:
        refuse_unfit(path)
    done = [
        attach(
            pen,
            reach,
            path,
            caption=args.caption,
            factors=args.factors,
            part=args.part,
            condition=args.condition,
            visit=args.visit,
            with_position=not args.without_position,
        )
        for path in args.files
    ]
    say_repairs(pen)
    if args.json:
        print_json([_document(reach, one) for one in done])
    else:
        for one in done:
            print_lines([*kept_lines(reach, one.line), *(f"  {tell}" for tell in one.tells)])
    return DONE


def _document(reach: str, one: "Attached") -> dict[str, Any]:
    line = one.line
    return {
        "reach": reach,
        "line": line.hash,
        "by": line.by,
        "at": line.at,
        "new": one.is_new,
        "tells": list(one.tells),
    } | dict(line.data)
