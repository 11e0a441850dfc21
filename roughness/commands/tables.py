"""Handbooks and their rows."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED, complain
from roughness.commands.arguments import add_handbooks, add_json, handbooks_of
from roughness.commands.results import print_json, print_lines

CHANNEL_TYPES = "chow-1959"


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    parser.add_argument(
        "key",
        nargs="?",
        metavar="KEY",
        help="print the rows of this handbook; chow-1959: n of types of channel",
    )
    add_handbooks(parser)
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Print all handbooks, or every row of one."""
    from roughness.commands import handbook_text as text
    from roughness.errors import HandbookError
    from roughness.shelf.handbooks import handbook_keys, load_handbook

    folder = handbooks_of(args)
    if args.key == CHANNEL_TYPES:
        return _print_channel_types(args)
    if args.key is not None:
        handbook = load_handbook(args.key, folder)
        if args.json:
            print_json(text.handbook_document(handbook))
        else:
            print_lines(text.handbook_lines(handbook))
        return DONE
    handbooks, unusable = [], 0
    for key in handbook_keys(folder):
        try:
            handbooks.append(load_handbook(key, folder))
        except HandbookError as error:
            complain(str(error))
            unusable += 1
    if args.json:
        print_json([text.summary(handbook, folder) for handbook in handbooks])
    else:
        print_lines(text.summary_lines(handbooks, folder))
    return STANDS_STOPPED if unusable else DONE


def _print_channel_types(args: argparse.Namespace) -> int:
    from roughness.commands.channel_type_text import channel_type_lines
    from roughness.desk.cross_checking import channel_types

    table = channel_types()
    if args.json:
        print_json(table)
    else:
        print_lines(channel_type_lines(table))
    return DONE
