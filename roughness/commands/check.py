"""Whether trails, handbooks, evidence, signatures and findings hold; writes nothing."""

import argparse
import sys
from collections.abc import Iterator
from typing import TYPE_CHECKING

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_json, add_survey
from roughness.commands.results import print_json, print_lines

if TYPE_CHECKING:
    from roughness.commands.documents import CheckDocument, PlacedFinding


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Print what was found; 1 where something is broken or a ``stop`` finding stands."""
    from roughness.commands.documents import check_document
    from roughness.desk.checking import check
    from roughness.desk.folder import SurveyFolder
    from roughness.quantities.foreign_text import printable

    checked = check(SurveyFolder(args.survey))
    document = check_document(checked)
    for file in checked.torn:
        print(
            f"{printable(file)}: the last line was cut off; the next writer moves the rest aside",
            file=sys.stderr,
        )
    for file in checked.unlisted:
        print(
            f"{printable(file)}: no reach names it; attach it, or move it out of the folder",
            file=sys.stderr,
        )
    if args.json:
        print_json(document)
    else:
        print_lines(_lines(document))
    return DONE if checked.passed else STANDS_STOPPED


def _lines(document: "CheckDocument") -> Iterator[str]:
    from roughness.commands.plain_tables import wrapped
    from roughness.quantities.foreign_text import printable

    for fault in document.broken:
        place = f"{fault.file} line {fault.line}" if fault.line else fault.file
        yield from wrapped(printable(f"broken: {place}: {fault.what}"), rest="  ")
    for finding in document.findings:
        text = f"{finding.level}: {_about(finding)}: {finding.says} [{finding.rule}]"
        yield from wrapped(printable(text), rest="  ")
        if finding.answered:
            yield from wrapped(printable(f"answered: {finding.answered}"), "  ", "    ")
    for signed in document.signatures:
        if signed.verdict != "wrong":
            level = "tell" if signed.verdict == "verified" else "ask"
            text = f"{level}: {signed.file} line {signed.line}: {signed.says}"
            yield from wrapped(printable(text), rest="  ")
    yield "intact" if document.intact else "not intact"


def _about(finding: "PlacedFinding") -> str:
    return ", ".join(
        word for word in (finding.reach, finding.part, finding.condition, finding.factor) if word
    )
