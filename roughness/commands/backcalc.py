"""n of a reach from a measured flow: its discharge, sections and water levels, as JSON.

A list of flows gives a list of n, each with its water level: n against stage.
"""

import argparse

from roughness.commands import DONE
from roughness.commands.arguments import add_file
from roughness.commands.reading import read_given
from roughness.commands.results import print_json


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_file(parser)
    parser.add_argument("--json", action="store_true", help="as always: the result is JSON")


def run(args: argparse.Namespace) -> int:
    """Print n with its errors, its subreaches and what is to be said about it."""
    from roughness.quantities.strict_json import LARGEST

    raw, where = read_given(args.file, LARGEST)
    from roughness.assessment.back_calculating import n_from_flow
    from roughness.assessment.measured_flow_reading import flow_of, read_measured_flows

    flows = read_measured_flows(raw, where)
    if isinstance(flows, tuple):
        print_json([n_from_flow(flow, flow_of(where, i)) for i, flow in enumerate(flows, 1)])
    else:
        print_json(n_from_flow(flows, where))
    return DONE
