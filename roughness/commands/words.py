"""What a verb is, and how the words behind it are taken apart."""

import argparse
from typing import NoReturn, Protocol

from roughness.commands import WRONG_INPUT, Screens, complain


class Verb(Protocol):
    """What the file of a verb offers."""

    def add_arguments(self, parser: argparse.ArgumentParser) -> None:
        """Declare what the verb takes."""

    def run(self, args: argparse.Namespace) -> int | Screens:
        """Do it."""


class Parser(argparse.ArgumentParser):
    """Says in one sentence what is wrong with the words."""

    def error(self, message: str) -> NoReturn:
        """Complain and leave with the status of wrong input."""
        complain(f"{message}; see `{self.prog} --help`")
        raise SystemExit(WRONG_INPUT)
