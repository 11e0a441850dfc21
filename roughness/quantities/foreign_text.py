"""Text that comes from outside: made printable, named, compared, suggested from."""

import difflib
import unicodedata
from collections.abc import Iterable

from roughness.errors import InputError

LONGEST_NAME = 120
# Cc, Cf: control and format characters (direction, zero width); Zl, Zp: line separators;
# Cs: halves of a surrogate pair. Emoji join with U+200D and U+FE0F, which stay readable.
_UNPRINTABLE = {"Cc", "Cf", "Cs", "Zl", "Zp"}
_JOINER = "\u200d"


def printable(text: str) -> str:
    r"""Return ``text`` with every control, direction and zero-width character spelled out.

    >>> print(printable("a\x1b[2Jb\u202e"))
    a\u001b[2Jb\u202e
    """
    if text.isprintable():
        return text
    return "".join(
        f"\\u{ord(sign):04x}" if unicodedata.category(sign) in _UNPRINTABLE else sign
        for sign in text
    )


def checked_name(text: str, what: str, where: str = "") -> str:
    """Return a name trimmed and in composed form (NFC), or say why it is none.

    Raises
    ------
    InputError
        Where it is empty, over 120 characters, or holds control or direction characters.
    """
    name = unicodedata.normalize("NFC", text).strip()
    if not name:
        raise InputError(f"the {what} is empty", where=where, wanted="give it a name")
    if len(name) > LONGEST_NAME:
        raise InputError(
            f"the {what} {printable(name[:24])!r}... has {len(name)} characters",
            where=where,
            wanted=f"at most {LONGEST_NAME}",
        )
    hidden = [s for s in name if unicodedata.category(s) in _UNPRINTABLE and s != _JOINER]
    if hidden:
        raise InputError(
            f"the {what} {printable(name)!r} holds a control or direction character",
            where=where,
            wanted="leave it out",
        )
    return name


def same_name_key(name: str) -> str:
    """Return what two names share when people would take them for the same one."""
    folded = unicodedata.normalize("NFC", name).strip().casefold()
    return " ".join(unicodedata.normalize("NFC", folded).split())


def nearest(word: str, known: Iterable[str]) -> str:
    """Return ``did you mean 'x'`` for the known word most like ``word``, or nothing."""
    close = difflib.get_close_matches(same_name_key(word), list(known), n=1, cutoff=0.55)
    return f"did you mean {close[0]!r}" if close else ""
