"""What the lines of a review say: questions, verdicts, second opinions, evidence.

Read strictly by pydantic, as the other lines of :mod:`roughness.trail.data`.
"""

from dataclasses import dataclass
from typing import Annotated, Any, ClassVar, Literal

from pydantic import Field

from roughness.survey.choices import STRICT, Judgement
from roughness.survey.words import Factor
from roughness.trail.data import Hash

EVIDENCE_FILE = r"^evidence/[0-9a-f]{12}-[^/\\\x00-\x1f\x7f]{1,200}$"
_Text = Annotated[str, Field(min_length=1)]


@dataclass(frozen=True, kw_only=True)
class Question:
    """Something a reviewer wants to know; open until an answer names it."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    text: _Text
    factor: Factor | None = None
    """Absent: about the whole part."""
    segment: str | None = None
    follows: Hash | None = None
    """The question of the same thread that this one goes on from."""


@dataclass(frozen=True, kw_only=True)
class Answer:
    """What somebody says to a question."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    question: Hash
    text: _Text


@dataclass(frozen=True, kw_only=True)
class FindingAnswered:
    """What somebody says to a finding; it stands while the same finding says the same."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    rule: str
    says: str
    text: _Text
    factor: Factor | None = None


@dataclass(frozen=True, kw_only=True)
class AcceptedN:
    """n as it was accepted."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    low: float
    best: float
    high: float


@dataclass(frozen=True, kw_only=True)
class AcceptedSpread:
    """The spread of the choices as it was accepted."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    mean: float
    sd: float
    p05: float
    p16: float
    p50: float
    p84: float
    p95: float


@dataclass(frozen=True, kw_only=True)
class Accept:
    """A reviewer's word that one part under one condition is right as it was at one head."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    head: Hash
    """The last line of the trail that the reviewer judged."""
    n: AcceptedN
    spread: AcceptedSpread
    program: str
    """Version of the program that computed n and spread."""
    handbook: str
    handbook_sha256: Hash
    condition_line: Hash | None
    """The line of the survey's trail that said what the condition is; null where none did."""
    overruled: _Text | None = None
    """Why it was accepted although something spoke against it."""
    same_person: Literal[True] | None = None
    """Set where the one who estimated accepted, which the survey then allowed."""
    signature: str | None = None
    signed_by: str | None = None
    """The public key that the signature is checked with, in one line."""


@dataclass(frozen=True, kw_only=True)
class Return:
    """A reviewer's word that something is to be done first."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    reason: _Text


@dataclass(frozen=True, kw_only=True)
class Opinion:
    """A second estimate by somebody who did not see the first; it never changes n."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    handbook_sha256: Hash
    estimate: Judgement
    note: str | None = None


@dataclass(frozen=True, kw_only=True)
class Consensus:
    """What several people agreed on: replaces every choice of its part and condition."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    handbook_sha256: Hash
    estimate: Judgement
    reason: _Text
    opinions: tuple[Hash, ...]
    """The opinions that were weighed against what stood."""


@dataclass(frozen=True, kw_only=True)
class Evidence:
    """A photo or document in the survey's folder; the same sha256 again replaces the rest."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    file: Annotated[str, Field(pattern=EVIDENCE_FILE)]
    sha256: Hash
    size: Annotated[int, Field(ge=0)]
    name: str
    """The name it came with."""
    caption: str | None = None
    factors: tuple[Factor, ...] | None = None
    """What it supports."""
    part: str | None = None
    """Absent: the whole reach."""
    condition: str | None = None
    visit: str | None = None
    taken_at: str | None = None
    position: tuple[float, float] | None = None
    """Longitude and latitude (WGS 84)."""


@dataclass(frozen=True, kw_only=True)
class Merge:
    """Two ways of one trail united; computed, not authored, so it says nothing itself."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT
