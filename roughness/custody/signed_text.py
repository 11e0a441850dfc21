"""What a signature of an acceptance covers, and what a signature says of itself.

The text can be rebuilt from the accept line and the first line of its trail by anybody, with
no program of ours: a JSON object with sorted keys and no blanks, UTF-8, one newline at the end.
The signature is one of OpenSSH's (its PROTOCOL.sshsig describes the layout, *memory*); it is
made and verified by ``ssh-keygen -Y`` alone. Here it is only read for the key it names.
"""

import base64
import binascii
import json
import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from roughness.errors import InputError

NAMESPACE: Final = "acceptance@roughness"
"""Keeps a signature from passing for one of something else, such as a commit or a file."""
FORMAT: Final = 1
KEY_TYPE: Final = "ssh-ed25519"
_MAGIC = b"SSHSIG"
_ARMOUR = re.compile(
    r"-----BEGIN SSH SIGNATURE-----\n([A-Za-z0-9+/=\n]{1,8192})\n-----END SSH SIGNATURE-----\n?"
)


@dataclass(frozen=True, slots=True)
class SignatureHead:
    """What a signature says of itself; whether that is true, only ssh-keygen can tell."""

    key_type: str
    public_key: str
    """One line, type and base64, without a comment."""
    namespace: str


def signed_text(
    *,
    survey: str,
    reach: str,
    part: str,
    condition: str,
    head: str,
    n: Mapping[str, float],
    by: str,
    at: str,
) -> bytes:
    """Return the bytes that are signed.

    Parameters
    ----------
    survey, reach : str
        The survey's id and the reach's name, as the first line of the trail has them.
    part, condition, head : str
        As the accept line has them; ``head`` is the hash of the last line that was judged.
    n : mapping
        ``low``, ``best`` and ``high`` in s/m^(1/3).
    by, at : str
        As the accept line has them, letter by letter.
    """
    said = {
        "format": FORMAT,
        "survey": survey,
        "reach": reach,
        "part": part,
        "condition": condition,
        "head": head,
        "n": {word: float(n[word]) for word in ("low", "best", "high")},
        "verdict": "accept",
        "by": by,
        "at": at,
    }
    text = json.dumps(said, ensure_ascii=False, sort_keys=True, separators=(",", ":"))
    # A half of a surrogate pair can stand in a foreign line; it must not end the check of others.
    return text.encode("utf-8", "surrogatepass") + b"\n"


def head_of_signature(armoured: str) -> SignatureHead:
    """Read which key a signature names, and for what.

    Raises
    ------
    InputError
        Where it is no signature of this kind.
    """
    found = _ARMOUR.fullmatch(armoured)
    if found is None:
        raise InputError("it is no SSH signature")
    try:
        blob = base64.b64decode(found[1].replace("\n", ""), validate=True)
        if not blob.startswith(_MAGIC) or int.from_bytes(blob[6:10], "big") != 1:
            raise InputError("it is no SSH signature of version 1")
        key, rest = _string(blob[10:])
        namespace, _ = _string(rest)
        key_type, _ = _string(key)
        kind = key_type.decode("ascii")
        line = f"{kind} {base64.b64encode(key).decode('ascii')}"
        return SignatureHead(kind, line, namespace.decode("utf-8"))
    except (binascii.Error, UnicodeDecodeError):
        raise InputError("it is no SSH signature") from None


def _string(blob: bytes) -> tuple[bytes, bytes]:
    """Split off a string that stands behind its length in four bytes."""
    end = 4 + int.from_bytes(blob[:4], "big")
    if len(blob) < 4 or len(blob) < end:
        raise InputError("it is an SSH signature that was cut off")
    return blob[4:end], blob[end:]
