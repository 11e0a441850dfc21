"""The one place that knows both doors: commands and screens."""

from __future__ import annotations

import gc
import sys

from roughness import commands

TYPE_CHECKING = False
if TYPE_CHECKING:
    from collections.abc import Sequence


# A command ends before collecting garbage pays; it took 35 ms of the 200 ms of `estimate`.
_SELDOM = 100_000, 50, 50


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command, or open the screens; return the exit status."""
    is_whole_process = argv is None
    usual = gc.get_threshold()
    if is_whole_process:
        gc.set_threshold(*_SELDOM)
    outcome = commands.run(sys.argv[1:] if argv is None else argv)
    if isinstance(outcome, commands.Screens):
        gc.set_threshold(*usual)
        from roughness.screens.app import open_screens

        return open_screens(outcome.survey, by=outcome.by, demo=outcome.demo)
    if is_whole_process:
        gc.freeze()
    return outcome


if __name__ == "__main__":
    sys.exit(main())
