"""Signatures by ``ssh-keygen -Y``: no cryptography of our own.

Every call runs without a shell, terminal or prompt, in an environment of its own, for 10 s at
most. Paths are handed over absolute, and a name stands behind ``-I`` in the same argument, so
that neither can be taken for an option.
"""

import os
import shutil
import signal
import subprocess
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Final

from roughness.custody.signed_text import KEY_TYPE, NAMESPACE, head_of_signature
from roughness.errors import InputError
from roughness.quantities.foreign_text import LONGEST_NAME, printable, same_name_key
from roughness.trail.lines import instant

SECONDS: Final = 10
_REFUSED = 255  # how ssh-keygen ends where it says no; other ends are faults of its own
# HOME and the socket lead to the person's own keys; TZ is what a verify-time is read in.
_KEPT = ("PATH", "HOME", "USERPROFILE", "SYSTEMROOT", "SSH_AUTH_SOCK", "TMPDIR", "TEMP", "TZ")
_WHY_NOT = (
    ("passphrase", "is locked with a passphrase", "add it to ssh-agent first: ssh-add KEY"),
    ("too open", "can be read by others", "chmod 600 KEY"),
    ("agent refused", "was refused by ssh-agent", "confirm it there, or name another key"),
    (
        "no private key found",
        "has no private key here",
        "add it to ssh-agent, or name the private key",
    ),
    ("couldn't load public key", "is no key", "the path of an Ed25519 key"),
)


class SigningToolError(InputError):
    """``ssh-keygen`` is not there, or did not come to an end by itself."""


@dataclass(frozen=True, slots=True)
class Signature:
    """A signature as an accept line carries it."""

    armoured: str
    public_key: str
    """One line, type and base64, without a comment."""


def sign(text: bytes, key: Path) -> Signature:
    """Sign a text with an Ed25519 key: a private key, or a public one that ssh-agent holds.

    Raises
    ------
    InputError
        Where the key cannot be used, or ``ssh-keygen`` is not there; nobody is ever asked for
        a passphrase.
    """
    path = _key_file(key)
    run = _ssh_keygen(["sign", "-f", str(path), "-n", NAMESPACE], text)
    if run.returncode != 0:
        raise _not_signed(path, run)
    armoured = run.stdout.decode("ascii", "replace").replace("\r\n", "\n")
    head = head_of_signature(armoured)
    if head.key_type != KEY_TYPE:
        raise InputError(
            f"the key {printable(str(path))} is of the type {printable(head.key_type)}",
            wanted="an Ed25519 key: ssh-keygen -t ed25519",
        )
    # An agent could hand back anything, and a line that is kept is never changed.
    if not fits(text, armoured):
        raise InputError(f"the signature with {printable(str(path))} does not fit what was signed")
    return Signature(armoured, head.public_key)


def fits(text: bytes, armoured: str) -> bool:
    """Return whether a signature is one of this text by the key it names, whosever that is."""
    with _in_a_file(armoured) as file:
        run = _ssh_keygen(["check-novalidate", "-n", NAMESPACE, "-s", file], text)
    return _said_yes(run)


def name_of_signer(text: bytes, armoured: str, by: str, at: str, allowed: Path) -> str | None:
    """Return ``by`` as the allowed-signers file names the key's owner, or None where it does not.

    Raises
    ------
    SigningToolError
        Where ``ssh-keygen`` is not there or failed.
    """
    if _is_of(text, armoured, by, at, allowed):
        return by
    for name in names_of_key(armoured, at, allowed):
        if same_name_key(name) == same_name_key(by) and _is_of(text, armoured, name, at, allowed):
            return name
    return None


def names_of_key(armoured: str, at: str, allowed: Path) -> tuple[str, ...]:
    """Return whom the allowed-signers file names as the owner of the key of a signature."""
    with _in_a_file(armoured) as file:
        words = ["find-principals", "-s", file, "-f", str(allowed), *_when(at)]
        run = _ssh_keygen(words, b"")
    if not _said_yes(run):
        return ()
    names = run.stdout.decode("utf-8", "replace").replace("\n", ",").split(",")
    return tuple(name for name in dict.fromkeys(names) if name)


def _is_of(text: bytes, armoured: str, name: str, at: str, allowed: Path) -> bool:
    # An empty name would make the next word the name; no author was ever called so.
    if not 0 < len(name) <= LONGEST_NAME or not name.isprintable():
        return False
    with _in_a_file(armoured) as file:
        words = ["verify", "-f", str(allowed), f"-I{name}", "-n", NAMESPACE, "-s", file]
        return _said_yes(_ssh_keygen([*words, *_when(at)], text))


def _when(at: str) -> tuple[str, ...]:
    """Say that a key is to be valid when it signed: one that expired later signed all the same."""
    moment = instant(at)
    try:
        local = moment.astimezone() if moment else None
    except (ValueError, OverflowError, OSError):
        local = None
    return (f"-Overify-time={local:%Y%m%d%H%M%S}",) if local else ()


@contextmanager
def _in_a_file(armoured: str) -> Iterator[str]:
    try:
        with TemporaryDirectory(prefix="roughness-") as folder:
            file = Path(folder).resolve() / "signature"
            file.write_bytes(armoured.encode("utf-8", "replace"))
            yield str(file)
    except OSError as error:
        raise SigningToolError(f"no temporary file can be written ({error.strerror})") from None


def _ssh_keygen(words: list[str], text: bytes) -> "subprocess.CompletedProcess[bytes]":
    program = shutil.which("ssh-keygen")
    if program is None:
        raise SigningToolError("ssh-keygen is not there", wanted="install the OpenSSH client")
    quiet = {"LC_ALL": "C", "SSH_ASKPASS_REQUIRE": "never"}
    pipe = subprocess.PIPE
    try:
        with subprocess.Popen(
            [program, "-Y", *words],
            stdin=pipe,
            stdout=pipe,
            stderr=pipe,
            env={name: os.environ[name] for name in _KEPT if name in os.environ} | quiet,
            # Without a terminal of its own it cannot ask for a passphrase across a screen.
            start_new_session=True,
        ) as process:
            return _finished(process, text)
    except OSError as error:
        raise SigningToolError(f"ssh-keygen cannot be run ({error.strerror})") from None


def _finished(
    process: "subprocess.Popen[bytes]", text: bytes
) -> "subprocess.CompletedProcess[bytes]":
    try:
        out, told = process.communicate(text, timeout=SECONDS)
    except subprocess.TimeoutExpired:
        _stop(process)
        raise SigningToolError(f"ssh-keygen did not answer within {SECONDS} s") from None
    return subprocess.CompletedProcess(process.args, process.returncode, out, told)


def _stop(process: "subprocess.Popen[bytes]") -> None:
    """End it with what it started (a helper that waits for a touch); they are one session."""
    if os.name == "posix":
        with suppress(ProcessLookupError):
            os.killpg(process.pid, signal.SIGKILL)
    process.kill()


def _said_yes(run: "subprocess.CompletedProcess[bytes]") -> bool:
    if run.returncode not in (0, _REFUSED):
        raise SigningToolError(f"ssh-keygen failed ({_told(run) or f'end {run.returncode}'})")
    return run.returncode == 0


def _key_file(key: Path) -> Path:
    named = printable(str(key))
    try:
        path = key.expanduser().resolve(strict=True)
    except (OSError, RuntimeError, ValueError):
        raise InputError(f"the key {named} is not there", wanted="the path of a key file") from None
    if not path.is_file():
        raise InputError(f"the key {named} is no file", wanted="the path of a key file")
    return path


def _not_signed(path: Path, run: "subprocess.CompletedProcess[bytes]") -> InputError:
    told = run.stderr.decode("utf-8", "replace").casefold()
    named = printable(str(path))
    for word, what, wanted in _WHY_NOT:
        if word in told:
            return InputError(f"the key {named} {what}", wanted=wanted)
    return InputError(f"the key {named} could not sign ({_told(run) or 'no reason given'})")


def _told(run: "subprocess.CompletedProcess[bytes]") -> str:
    lines = run.stderr.decode("utf-8", "replace").split("\n")
    return printable(next((line.strip() for line in reversed(lines) if line.strip()), ""))
