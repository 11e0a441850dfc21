"""One file a verb. Nothing is imported before the verb is known, so that starting is quick.

Exit status of every verb: 0 done; 1 done, and a ``stop`` finding or a failed check
stands; 2 the input is wrong (one sentence on stderr, nothing written).
"""

from __future__ import annotations

import os
import sys
from contextlib import suppress
from importlib import import_module

from roughness import __version__
from roughness.errors import RoughnessError, UnknownNameError

# Not from `typing`, which takes longer to load than all the rest of `--version`.
TYPE_CHECKING = False
if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

DONE, STANDS_STOPPED, WRONG_INPUT = 0, 1, 2

# The verbs in the order in which a survey meets them, with the line `--help` shows.
VERBS: dict[str, str] = {
    "demo": "a copy of the invented demo survey, opened",
    "new": "make a survey, from a list of reaches or empty",
    "list": "reaches with n, range, status and open findings",
    "show": "one reach's reasoning, as text",
    "record": "put an estimate into a reach's trail",
    "attach": "copy photos or documents of a reach into the survey",
    "adopt": "let another n than the estimate go to the model, with a reason",
    "estimate": "n, range, spread, findings and reasoning for one part",
    "section": "depth, velocity and composite n of a cross-section",
    "backcalc": "n of a reach from a measured flow",
    "crosscheck": "other roads to n: grain, slope and channel-type values on one axis",
    "check": "trails, handbooks and findings of a survey",
    "merge": "unite a survey with another copy of it",
    "export": "the table of n for a model: .csv or .json",
    "report": "one page with every n and its reasons, to read and to print",
    "fieldsheet": "a sheet for each reach to take along, printed",
    "tables": "handbooks and their rows",
    "schema": "the JSON Schema of an input or output",
}

_USAGE = """\
usage: roughness [SURVEY]            the screens
       roughness VERB ... [--help]   one of the verbs below

Documents Manning's n for every reach of a surveyed stream, with its reasons.

{verbs}
FILE may be - (standard input). n is a judgement: calibrate it; have it reviewed
"""


class Screens:
    """The wish to see the screens."""

    def __init__(self, survey: Path | None, *, by: str | None = None, demo: bool = False) -> None:
        self.survey, self.by, self.demo = survey, by, demo


def complain(sentence: str) -> None:
    """Say on standard error what is wrong; standard output is for results alone."""
    from roughness.quantities.foreign_text import printable

    shown = "\n".join(map(printable, sentence.split("\n")))
    print(f"roughness: {shown}", file=sys.stderr)


def run(words: Sequence[str]) -> int | Screens:
    """Run the command line ``words``; return the exit status, or the wish for the screens."""
    if sys.stdout is None:  # closed by who started this: nothing is done that nobody can see
        complain("there is no standard output; give it a place, such as /dev/null")
        return WRONG_INPUT
    try:
        return _dispatch(words)
    except RoughnessError as error:
        complain(str(error))
        return WRONG_INPUT
    except OSError as error:
        return _not_delivered(error)
    except KeyboardInterrupt:
        complain("stopped")
        return WRONG_INPUT
    except SystemExit as leave:
        return leave.code if isinstance(leave.code, int) else WRONG_INPUT


def _dispatch(words: Sequence[str]) -> int | Screens:
    first = words[0] if words else ""
    if first in ("-h", "--help", "help"):
        print(help_page(), end="")
        return DONE
    if first == "--version":
        print(f"roughness {__version__}")
        return DONE
    if first in VERBS:
        return _run_verb(first, words[1:])
    return _open(words)


def _run_verb(name: str, words: Sequence[str]) -> int | Screens:
    from roughness.commands.words import Parser, Verb

    verb: Verb = import_module(f"roughness.commands.{name}")
    parser = Parser(prog=f"roughness {name}", description=verb.__doc__, allow_abbrev=False)
    verb.add_arguments(parser)
    outcome = verb.run(parser.parse_args(words))
    sys.stdout.flush()
    return outcome


def _open(words: Sequence[str]) -> int | Screens:
    from pathlib import Path

    from roughness.commands.words import Parser

    _refuse_mistyped_verb(words)
    parser = Parser(prog="roughness", allow_abbrev=False)
    parser.add_argument("survey", nargs="?", type=Path)
    parser.add_argument("--by")
    args = parser.parse_args(words)
    if not at_a_terminal():
        complain("the screens need a terminal; `roughness list SURVEY` prints the table")
        return WRONG_INPUT
    return Screens(args.survey, by=args.by)


def _refuse_mistyped_verb(words: Sequence[str]) -> None:
    first = words[0] if words else "-"
    if first.startswith("-") or "/" in first or "\0" in first or os.path.lexists(first):
        return
    from roughness.quantities.foreign_text import nearest

    if hint := nearest(first, VERBS):
        raise UnknownNameError(f"{first} is neither a verb nor a survey", wanted=hint)


def at_a_terminal() -> bool:
    """Return whether the screens can be seen; they are drawn on standard error."""
    streams = sys.stdin, sys.stdout, sys.stderr
    return all(stream is not None and stream.isatty() for stream in streams)


def help_page() -> str:
    """Return what ``roughness --help`` prints: one page."""
    width = max(map(len, VERBS))
    return _USAGE.format(verbs="\n".join(f"  {v:<{width}}  {line}" for v, line in VERBS.items()))


def _not_delivered(error: OSError) -> int:
    """Say which file could not be used; a reader that had enough of the output is no fault."""
    had_enough = isinstance(error, BrokenPipeError)
    if error.filename is None:
        _let_go_of_output()
    if not had_enough:
        complain(_about_file(error))
    return DONE if had_enough else WRONG_INPUT


def _let_go_of_output() -> None:
    """Send what is left in the buffer nowhere, so that leaving does not fail on it again."""
    with suppress(OSError, ValueError):
        nowhere = os.open(os.devnull, os.O_WRONLY)
        os.dup2(nowhere, sys.stdout.fileno())
        os.close(nowhere)


def _about_file(error: OSError) -> str:
    name = os.fspath(error.filename) if error.filename is not None else "output"
    return f"{name}: {(error.strerror or str(error)).lower()}"
