"""What can be wrong, as a tree. A bad judgement is never here: it is a finding.

RoughnessError                 every message is one sentence for the person at the keyboard
├── InputError                 what was handed in is wrong; nothing was written
│   ├── UnknownNameError       a name that is not known here; names the nearest one that is
│   └── HandbookError          a handbook file that cannot be used
└── RecordError                something about the files of a survey
    ├── BrokenTrailError       a trail whose lines do not hang together; read-only
    ├── BusyError              somebody else is writing right now
    └── NotKeptError           the disk did not take it: the choice is not kept
"""


class RoughnessError(Exception):
    """Anything this tool says no to; ``str(error)`` is one clear sentence."""


class InputError(RoughnessError):
    """What was handed in is wrong: what, where, and what would be right.

    Parameters
    ----------
    what : str
        What is wrong, with the value that was met.
    where : str
        File, line or field; empty where the sentence says it already.
    wanted : str
        What would be right.
    """

    def __init__(self, what: str, *, where: str = "", wanted: str = "") -> None:
        self.what, self.where, self.wanted = what, where, wanted
        sentence = f"{where}: {what}" if where else what
        super().__init__(f"{sentence}; {wanted}" if wanted else sentence)


class UnknownNameError(InputError):
    """A name that is not known here; the nearest known one is in ``wanted``."""


class HandbookError(InputError):
    """A handbook file that cannot be used as it is."""


class RecordError(RoughnessError):
    """Something about the files of a survey."""


class BrokenTrailError(RecordError):
    """A trail whose lines do not hang together; it opens read-only."""


class BusyError(RecordError):
    """Another program holds the survey's lock."""


class NotKeptError(RecordError):
    """The disk did not take the line: what it says is not kept."""
