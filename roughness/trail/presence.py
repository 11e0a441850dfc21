"""Who else has a survey open: the text in ``SURVEY/.lock``, one JSON object a line.

It only informs. A process that died leaves its line behind; on the same machine such a
line is seen to be stale, from another machine (a synced folder) it shows since when.
"""

import json
import os
import platform
import sys
from collections.abc import Sequence
from contextlib import suppress
from dataclasses import asdict, dataclass

from roughness.quantities.foreign_text import printable

_LONGEST = 1 << 16


@dataclass(frozen=True)
class Present:
    """One person at one machine."""

    by: str
    host: str
    pid: int
    since: str
    writing: bool = False

    def __str__(self) -> str:
        return printable(f"{self.by} on {self.host} (since {self.since})")

    @classmethod
    def here(cls, by: str, at: str, *, writing: bool = False) -> "Present":
        """Return the note of this very process."""
        return cls(by, platform.node(), os.getpid(), at, writing)

    @classmethod
    def read_all(cls, raw: bytes) -> list["Present"]:
        """Return the notes in the text of a lock file; what cannot be read is passed over."""
        found = []
        for line in raw[:_LONGEST].decode("utf-8", "replace").splitlines():
            with suppress(ValueError, TypeError, RecursionError):
                one = cls(**json.loads(line))
                if isinstance(one.pid, int) and isinstance(one.host, str):
                    found.append(one)
        return found

    @property
    def is_me(self) -> bool:
        """Whether this process wrote the note."""
        return (self.host, self.pid) == (platform.node(), os.getpid())

    @property
    def may_live(self) -> bool:
        """Whether the process may still run: only a dead one of this machine is known dead."""
        # There is no harmless signal on Windows, so nobody is known to be dead there.
        if sys.platform == "win32" or self.host != platform.node() or self.pid <= 0:
            return True
        try:
            os.kill(self.pid, 0)
        except ProcessLookupError:
            return False
        except (OSError, OverflowError):
            return True
        return True


def presences(handle: int) -> list[Present]:
    """Return the notes in an open lock file."""
    try:
        os.lseek(handle, 0, os.SEEK_SET)
        return Present.read_all(os.read(handle, _LONGEST))
    except OSError:
        return []


def write_presences(handle: int, present: Sequence[Present]) -> None:
    """Replace the notes in an open lock file; a full disk only costs the information."""
    text = "".join(json.dumps(asdict(one)) + "\n" for one in present)
    with suppress(OSError):
        os.ftruncate(handle, 0)
        os.lseek(handle, 0, os.SEEK_SET)
        os.write(handle, text.encode())
