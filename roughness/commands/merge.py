"""Unite a survey with another copy of it, or with the conflict copies in its folder."""

import argparse
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from roughness.commands import DONE, STANDS_STOPPED, WRONG_INPUT, complain
from roughness.commands.arguments import add_json, add_survey
from roughness.commands.results import print_json, print_lines

if TYPE_CHECKING:
    from roughness.commands.documents import MergeDocument
    from roughness.desk.merging import Merged, United


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    parser.add_argument(
        "other",
        nargs="?",
        type=Path,
        metavar="OTHER",
        help="another copy of the survey's folder, or one trail of it; without it the conflict"
        " copies that lie in the survey's folder are united",
    )
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Unite and say what came of it; 1 where a conflict stands or a trail was left aside."""
    from roughness.commands.documents import MergeDocument
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.merging import merge, standing_conflicts

    survey = SurveyFolder(args.survey)
    merged = merge(survey, args.other)
    for refused in merged.not_taken:
        complain(f"left as it is: {refused.file}: {refused.why}")
    if merged.not_taken and not merged.compared and not merged.united:
        return WRONG_INPUT
    document = MergeDocument(
        united=merged.united,
        copied=merged.files.copied,
        left=merged.files.left,
        not_taken=merged.not_taken,
        removable=merged.removable,
        conflicts=tuple(standing_conflicts(survey)),
    )
    if args.json:
        print_json(document)
    else:
        print_lines(_lines(document))
    _say_files(merged)
    return STANDS_STOPPED if document.conflicts or document.not_taken else DONE


def _lines(document: "MergeDocument") -> Iterator[str]:
    from roughness.commands.plain_tables import wrapped
    from roughness.quantities.foreign_text import printable

    for trail in document.united:
        yield from wrapped(printable(f"{trail.file}: {_what_came(trail)}"), rest="  ")
    for file in document.copied:
        yield from wrapped(f"{file}: copied", rest="  ")
    for sentence in document.left:
        yield from wrapped(sentence, rest="  ")
    for file in document.removable:
        said = f"{file}: holds nothing that the survey lacks; it may be removed"
        yield from wrapped(said, rest="  ")
    for one in document.conflicts:
        text = f"stop: {one.reach}, {one.part}, {one.condition}: {one.says}"
        yield from wrapped(printable(text), rest="  ")
    if not document.united and not document.copied:
        yield "nothing new"


def _what_came(trail: "United") -> str:
    lines = f"{trail.new_lines} new line{'' if trail.new_lines == 1 else 's'}"
    if trail.is_new:
        return f"new here, {lines}"
    if not trail.new_lines and not trail.joined:
        return "put in order, nothing new"
    return f"{lines}, two ends joined" if trail.joined else lines


def _say_files(merged: "Merged") -> None:
    if merged.repaired:
        print(
            "the last line of a trail was cut off; the rest was moved to a .torn file beside it",
            file=sys.stderr,
        )
    if merged.unlocked:
        print("this file system has no locks: let one person write at a time", file=sys.stderr)
