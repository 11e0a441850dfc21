"""What a handbook file may hold: names, types and nothing else. Values are checked later."""

from typing import Annotated, Any

from pydantic import AfterValidator, BaseModel, ConfigDict, Field
from pydantic_core import PydanticCustomError

from roughness.handbook.tables import Provenance
from roughness.quantities.foreign_text import printable
from roughness.survey.words import Factor, Plants, Setting

LONGEST_SHORT = 44


def _clean(text: str) -> str:
    """Set lines and blanks to single blanks; refuse what a terminal would obey."""
    words = " ".join(text.split())
    if not words:
        raise PydanticCustomError("empty_text", "it is empty")
    if printable(words) != words:
        raise PydanticCustomError("control", "it holds a control or direction character")
    return words


Text = Annotated[str, AfterValidator(_clean)]
Key = Annotated[str, Field(pattern=r"^[a-z0-9]+(-[a-z0-9]+)*$", max_length=40)]
Pair = Annotated[list[float], Field(min_length=2, max_length=2)]


class _Strict(BaseModel):
    model_config = ConfigDict(extra="forbid", strict=True, allow_inf_nan=False, frozen=True)


class GradeShape(_Strict):
    """One row. Either ``value`` alone, or ``low`` and ``high``, or ``by_d50_mm``."""

    key: Key
    name: Text
    value: float | None = None
    low: float | None = None
    best: float | None = None
    high: float | None = None
    by_d50_mm: Annotated[list[Pair], Field(min_length=2)] | None = None
    short: Annotated[Text, Field(max_length=LONGEST_SHORT)]
    criterion: Text
    table: Text | None = None
    page: Text | None = None
    provenance: Provenance
    criterion_provenance: Provenance | None = None
    lower_bound: bool = False
    d50_mm: Text | None = None
    blocked_percent: Text | None = None
    depth_over_height: dict[Plants, Text] = {}
    sinuosity: Text | None = None


class FactorShape(_Strict):
    """One factor's table: its own grades, or those of the same factor in another setting."""

    title: Text
    question: Text
    source: Text
    notes: list[Text] = []
    grades: list[GradeShape] = []
    grades_from: Setting | None = None
    measured_gaps: bool = False
    """The publication itself leaves numbers between its classes without a grade."""
    measured_overlaps: bool = False
    """The publication itself gives some numbers to two grades."""
    says_below: Text | None = None
    says_above: Text | None = None


class HandbookShape(_Strict):
    """A whole file."""

    key: Key
    title: Text
    authors: Text
    year: Annotated[int, Field(ge=1850, le=2200)]
    publisher: Text
    good_for: Text
    not_for: Text
    notes: list[Text] = []
    symbols: dict[Factor, Text]
    flood_plains_from: Key | None = None
    channel: dict[Factor, FactorShape] | None = None
    flood_plain: dict[Factor, FactorShape] | None = Field(default=None, alias="flood-plain")

    @property
    def settings(self) -> dict[Setting, dict[Factor, FactorShape]]:
        """The settings that the file has tables for."""
        found: dict[Setting, dict[Factor, FactorShape]] = {}
        if self.channel is not None:
            found["channel"] = self.channel
        if self.flood_plain is not None:
            found["flood-plain"] = self.flood_plain
        return found


def place_of(loc: tuple[int | str, ...], raw: dict[str, Any]) -> str:
    """Return where in the file an error lies, grades by their key: ``channel.base.earth.low``."""
    words: list[str] = []
    node: Any = raw
    for step in loc:
        if step == "[key]":
            continue
        try:
            node = node[step]
        except (KeyError, IndexError, TypeError):
            node = None
        if not isinstance(step, int):
            words.append(str(step))
            continue
        named = node.get("key") if isinstance(node, dict) else None
        if words and words[-1] == "grades":
            words.pop()
        words.append(named if isinstance(named, str) else f"{step + 1}")
    return printable(".".join(words))
