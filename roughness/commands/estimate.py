"""n with its range, spread, findings and reasoning for one part of a reach, as JSON."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_file, add_handbooks, handbooks_of
from roughness.commands.reading import read_given
from roughness.commands.results import print_json


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_file(parser)
    parser.add_argument("--json", action="store_true", help="as always: the result is JSON")
    add_handbooks(parser)


def run(args: argparse.Namespace) -> int:
    """Print the estimate; 1 where a ``stop`` finding stands."""
    from roughness.quantities.strict_json import LARGEST

    raw, where = read_given(args.file, LARGEST)
    from roughness.desk.estimating import estimate

    found = estimate(raw, handbooks=handbooks_of(args), where=where)
    print_json(found.as_document())
    return STANDS_STOPPED if found.stands_stopped else DONE
