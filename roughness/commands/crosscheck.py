"""Independent estimates of n for one part, to lay beside the judged one, as JSON."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_file
from roughness.commands.reading import read_given
from roughness.commands.results import print_json


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_file(parser)
    parser.add_argument("--json", action="store_true", help="as always: the result is JSON")


def run(args: argparse.Namespace) -> int:
    """Print the independent estimates; 1 where a ``stop`` finding stands."""
    from roughness.quantities.strict_json import LARGEST

    raw, where = read_given(args.file, LARGEST)
    from roughness.desk.cross_checking import crosschecked

    found = crosschecked(raw, where)
    print_json(found.as_document())
    stopped = any(finding.level == "stop" for finding in found.findings)
    return STANDS_STOPPED if stopped else DONE
