"""The lines of the evidence list, and what `?` says there."""

from typing import Final

from rich.text import Text

from roughness.desk.evidence_lists import Item
from roughness.quantities.foreign_text import printable
from roughness.screens.evidence_forms import About
from roughness.screens.photo_text import heading, state_word
from roughness.screens.reach_list import fitted

_STATE, _DATE = 9, 10

EVIDENCE_HELP: Final = """\
Photos and documents of a reach. Each is copied into the survey as it came and
never altered; its sha256 stands in the record, so that a file that is missing
or was changed is seen.

ok          every byte is as it was attached
! missing   the file is not in the survey's folder
! changed   another file lies there in its place
•           it is about the factor that the list was opened for

A photo tells itself when and where it was taken; the position can be left out
of the record when it is attached. The copy keeps all of its own metadata.

Instead of typing paths, watch a folder: copy files into it, and each that
stood still for 2 seconds is offered, with caption and factors to be filled in.
It is attached when you take the form, and stays out when you leave it with
Esc. The folder is watched while this list is open; nothing in it is moved.

KEYS
Enter  look at it; then ← → go to the others
+      attach a file by its path; watch a folder, or stop watching it
n      caption, factors, part and flow condition
Esc    back; u in the survey takes an attachment back
"""


def supports(item: Item, about: About) -> bool:
    """Whether an item is about the factor, or the part, that is at hand; all are of a reach."""
    return (
        about.part is None
        or about.condition is None
        or item.supports(about.part, about.condition, about.factor)
    )


def item_line(item: Item, about: About, width: int) -> Text:
    """Return an item in one line: state, date, caption, factors."""
    mark = "•" if about.factor and supports(item, about) else " "
    date = printable(item.evidence.taken_at or "")[:_DATE]
    factors = ", ".join(item.evidence.factors or ()) or "any factor"
    given = max(10, width // 4)
    room = max(8, width - _STATE - _DATE - given - 5)
    told = [
        mark,
        fitted(state_word(item), _STATE),
        fitted(date, _DATE),
        fitted(heading(item), room),
        fitted(factors, given),
    ]
    return Text(" ".join(told), no_wrap=True, overflow="ellipsis")
