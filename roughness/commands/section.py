"""Depth, velocity and composite n of a cross-section, as JSON."""

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
    """Print what flows; 1 where a ``stop`` finding stands."""
    from roughness.quantities.strict_json import LARGEST

    raw, where = read_given(args.file, LARGEST)
    from roughness.assessment.section_flow import flow_in
    from roughness.assessment.section_reading import read_section

    found = flow_in(read_section(raw, where), where)
    print_json(found.as_document())
    return STANDS_STOPPED if found.stands_stopped else DONE
