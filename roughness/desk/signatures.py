"""Whether signed acceptances are what their signatures say, as far as this person can tell.

A signature that does not fit is a fault of the survey. Whose key it is says the allowed-signers
file of the person who checks, never the survey's; a key that is not in it is to be asked about.
"""

from collections.abc import Iterator, Mapping
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import Any, Final, Literal

from roughness.custody.acceptance import is_among
from roughness.custody.signed_text import (
    KEY_TYPE,
    NAMESPACE,
    SignatureHead,
    head_of_signature,
    signed_text,
)
from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import allowed_signers
from roughness.desk.signing import SigningToolError, fits, name_of_signer, names_of_key
from roughness.errors import InputError, RoughnessError
from roughness.quantities.foreign_text import checked_name, printable
from roughness.quantities.printing import enumerate_words
from roughness.trail.kinds import read_data
from roughness.trail.lines import Line
from roughness.trail.reading import Trail
from roughness.trail.review_data import Accept

Verdict = Literal["verified", "unknown key", "not verified", "wrong"]
VERIFIED: Final = "verified"
UNKNOWN: Final = "unknown key"
UNVERIFIED: Final = "not verified"
WRONG: Final = "wrong"


@dataclass(frozen=True, kw_only=True)
class SignatureFound:
    """What was found out about the signature of one accept line."""

    file: str
    line: int
    part: str
    condition: str
    by: str
    """Whom the line names; a claim that only ``verified`` confirms."""
    verdict: Verdict
    says: str
    """The whole sentence."""


def text_to_sign(trail: Trail, data: Mapping[str, Any], by: str, at: str) -> bytes:
    """Return what is signed of an accept line that is to be written to a trail.

    Raises
    ------
    InputError
        Where the trail does not say whose it is.
    """
    return _text(trail, data, checked_name(by, "name of the author"), at)


def _text(trail: Trail, data: Mapping[str, Any], by: str, at: str) -> bytes:
    begun = trail.first.data if trail.first else {}
    survey, reach = begun.get("survey"), begun.get("reach")
    if not (isinstance(survey, str) and isinstance(reach, str)):
        raise InputError(f"{trail.file} does not say of which survey and reach it is")
    return signed_text(
        survey=survey,
        reach=reach,
        part=data["part"],
        condition=data["condition"],
        head=data["head"],
        n=data["n"],
        by=by,
        at=at,
    )


def signatures(survey: SurveyFolder) -> tuple[SignatureFound, ...]:
    """Return what is found of every signed acceptance, those past and taken back too."""
    allowed = _Allowed.of(survey)
    return tuple(
        found
        for noted in survey.state.reaches
        for found in _of_trail(_trail(survey, noted.reach), allowed)
    )


def _trail(survey: SurveyFolder, reach: str) -> Trail | None:
    try:
        return survey.reach_trail(reach)
    except RoughnessError:
        return None  # named by those who check trails


@dataclass(frozen=True)
class _Allowed:
    """The allowed-signers file, or why there is none to go by."""

    file: Path | None
    why_not: str = ""

    @classmethod
    def of(cls, survey: SurveyFolder) -> "_Allowed":
        named = allowed_signers()
        try:
            file = named.expanduser().resolve(strict=True)
        except (OSError, RuntimeError, ValueError):
            return cls(None, f"there is no allowed-signers file {printable(str(named))}")
        if file.is_relative_to(survey.folder.resolve()):
            return cls(None, "the allowed-signers file lies in the survey and does not count")
        if not file.is_file():
            return cls(None, f"the allowed-signers file {printable(str(named))} is no file")
        return cls(file)


def _of_trail(trail: Trail | None, allowed: _Allowed) -> Iterator[SignatureFound]:
    seen: dict[bytes, int] = {}
    for line in trail.lines if trail else ():
        if line.kind != "accept" or not {"signature", "signed_by"} & line.data.keys():
            continue
        try:
            accept = read_data(True, "accept", line.data, keep_unknown=True)
        except InputError:
            continue  # named as a line that cannot be used
        assert trail is not None and isinstance(accept, Accept)
        place = f"{accept.part} at {accept.condition}"
        verdict, says = _judged(trail, line, accept, allowed, seen)
        yield SignatureFound(
            file=trail.file,
            line=line.number,
            part=accept.part,
            condition=accept.condition,
            by=line.by,
            verdict=verdict,
            says=f"the acceptance of {printable(place)} {says}",
        )


def _judged(
    trail: Trail, line: Line, accept: Accept, allowed: _Allowed, seen: dict[bytes, int]
) -> tuple[Verdict, str]:
    armoured, key = accept.signature, accept.signed_by
    if armoured is None or key is None:
        return WRONG, "has a signature without its key, or a key without a signature"
    try:
        text = _text(trail, asdict(accept), line.by, line.at)
        if wrong := _mismatch(head_of_signature(armoured), key):
            return WRONG, wrong
    except InputError as error:
        return WRONG, f"has a signature that cannot be read: {error}"
    # Copied to the end, a signed line would undo a return that came after it.
    if seen.setdefault(text, line.number) != line.number:
        return WRONG, f"repeats what was signed in line {seen[text]}"
    try:
        return _asked(text, armoured, line, allowed)
    except SigningToolError as error:
        return UNVERIFIED, f"is signed, which was not verified: {error}"


def _mismatch(head: SignatureHead, key: str) -> str | None:
    if head.key_type != KEY_TYPE:
        return f"is signed with a key of the type {printable(head.key_type)}, not Ed25519"
    if head.public_key != key:
        return "is signed by another key than it says"
    if head.namespace != NAMESPACE:
        return f"has a signature that was made for {printable(head.namespace)}"
    return None


def _asked(text: bytes, armoured: str, line: Line, allowed: _Allowed) -> tuple[Verdict, str]:
    if allowed.file:
        name = name_of_signer(text, armoured, line.by, line.at, allowed.file)
        if name is not None:
            return VERIFIED, f"is verified as signed by {printable(name)}"
    if not fits(text, armoured):
        return WRONG, "has a signature that does not fit what it says"
    if allowed.file is None:
        return UNVERIFIED, f"is signed, by whom was not verified: {allowed.why_not}"
    shown = printable(str(allowed.file))
    names = names_of_key(armoured, line.at, allowed.file)
    # Listed under the right name and still not verified: the list lets it sign other things.
    if not names or is_among(line.by, names):
        key = printable(head_of_signature(armoured).public_key)
        return UNKNOWN, f"is signed by a key that {shown} does not allow for this: {key}"
    listed = enumerate_words([printable(name) for name in names])
    return WRONG, (
        f"names {printable(line.by)} and is signed with the key of {listed};"
        f" if that is one person, give the key both names in {shown}, with a comma"
    )
