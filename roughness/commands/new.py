"""Make a survey, from a list of reaches or empty."""

import argparse
import sys
from pathlib import Path

from roughness.commands import DONE
from roughness.commands.arguments import add_by, add_survey
from roughness.commands.reading import STANDARD_INPUT, read_given
from roughness.commands.results import print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    parser.add_argument(
        "--from",
        dest="reach_list",
        metavar="FILE",
        help="reaches as CSV or GeoJSON: reach, from, to, slope, lon, lat, note; - is standard"
        " input",
    )
    parser.add_argument("--name", metavar="TEXT", help="name of the survey (else the folder's)")
    parser.add_argument("--stream", metavar="TEXT", help="name of the stream")
    parser.add_argument("--handbook", metavar="KEY", help="the handbook that is used first")
    add_by(parser)


def run(args: argparse.Namespace) -> int:
    """Make the survey; nothing is asked but, in a terminal, a name nobody told yet."""
    from roughness.desk.folder import USUAL_HANDBOOK
    from roughness.desk.making import new_survey
    from roughness.desk.reach_lists import LARGEST_LIST, ReachList, read_reach_list
    from roughness.quantities.foreign_text import printable

    listed = ReachList((), ())
    if args.reach_list is not None:
        listed = read_reach_list(*read_given(args.reach_list, LARGEST_LIST))
    by = _author(args.by, may_ask=args.reach_list != STANDARD_INPUT)
    folder: Path = args.survey
    new_survey(
        folder,
        by,
        name=args.name,
        stream=args.stream,
        handbook=USUAL_HANDBOOK if args.handbook is None else args.handbook,
        reaches=listed.reaches,
    )
    if listed.unused:
        names = ", ".join(map(printable, listed.unused))
        print(f"columns that are not used: {names}", file=sys.stderr)
    count = len(listed.reaches)
    noun = "reach" if count == 1 else "reaches"
    print_lines([f"made {printable(str(folder))} with {count} {noun}"])
    return DONE


def _author(by: str | None, *, may_ask: bool) -> str:
    """Return who makes the survey; ask once where there is somebody to ask."""
    from roughness.desk.identity import NOBODY, known_person, remember_person, who

    if by is None and may_ask and known_person() is None and _is_terminal():
        print("Your name, as it shall stand in the record: ", end="", file=sys.stderr, flush=True)
        by = sys.stdin.readline().strip()
        if by:
            remember_person(by)
    # A new survey holds no judgement yet: whose it is may stay open.
    return who(by) if by is not None or known_person() else NOBODY


def _is_terminal() -> bool:
    return sys.stdin is not None and sys.stdin.isatty() and sys.stderr.isatty()
