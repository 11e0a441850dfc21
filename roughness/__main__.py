"""The one place that knows both doors: commands and screens."""

import sys
from collections.abc import Sequence

from roughness import commands


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command, or open the screens; return the exit status."""
    words = list(sys.argv[1:] if argv is None else argv)
    outcome = commands.run(words)
    if isinstance(outcome, commands.Screens):
        from roughness.screens.app import open_screens

        return open_screens(outcome.survey, by=outcome.by, demo=outcome.demo)
    return outcome


if __name__ == "__main__":
    sys.exit(main())
