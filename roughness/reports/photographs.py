"""Photos as small pictures inside the page: new pixels, no metadata, nothing foreign."""

from base64 import b64encode
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from roughness.desk.evidence_lists import Item, evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.errors import RoughnessError
from roughness.evidence.pictures import thumbnail
from roughness.survey.words import Factor

_LONGEST_SIDE: Final = 420
_SAYS: Final = {
    "missing": "the file is missing",
    "changed": "the file is not the one that was attached (its bytes differ)",
    "ok": "a document: not shown here, known by its hash",
}


@dataclass(frozen=True, kw_only=True)
class Photograph:
    """A photo or document of a reach, numbered within it."""

    number: int
    item: Item
    source: str | None = None
    """The small picture as a data URI; None where there is nothing to show."""
    width: int = 0
    height: int = 0
    why_not: str = ""
    """Why nothing is shown."""
    position: str | None = None
    """Where it was taken, unless positions are left out."""

    @property
    def name(self) -> str:
        """What stands for it where it cannot be seen: the caption, else the file's name."""
        return self.item.evidence.caption or self.item.evidence.name

    def supports(self, part: str, condition: str, factor: Factor) -> bool:
        """Whether it was filed for a factor of a part under a condition."""
        named = self.item.evidence.factors or ()
        return factor in named and self.item.supports(part, condition, factor)


def photographs_of(
    survey: SurveyFolder, reach: str, *, with_position: bool
) -> tuple[Photograph, ...]:
    """Return the evidence of a reach in the order it came, with small pictures where it may."""
    return tuple(
        _photograph(number, item, with_position=with_position)
        for number, item in enumerate(evidence_of(survey, reach), start=1)
    )


def _photograph(number: int, item: Item, *, with_position: bool) -> Photograph:
    position = item.evidence.position if with_position else None
    told = f"{position[1]:.5f}, {position[0]:.5f}" if position else None
    bare = Photograph(number=number, item=item, why_not=_SAYS[item.held], position=told)
    return _shown(bare, item.path) if item.may_be_shown else bare


def _shown(bare: Photograph, path: Path) -> Photograph:
    try:
        small = thumbnail(path, _LONGEST_SIDE)
    except RoughnessError as error:
        why = f"it cannot be shown: {error}"
        return Photograph(number=bare.number, item=bare.item, why_not=why, position=bare.position)
    return Photograph(
        number=bare.number,
        item=bare.item,
        source=f"data:{small.media_type};base64,{b64encode(small.data).decode('ascii')}",
        width=small.width,
        height=small.height,
        position=bare.position,
    )
