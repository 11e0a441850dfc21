"""What the lines of each kind say, as frozen dataclasses; pydantic reads them strictly.

Where a kind says what a noun of :mod:`roughness.survey` says, that noun is its data.
"""

from dataclasses import dataclass
from typing import Annotated, Any, ClassVar, Literal

from pydantic import Field

from roughness.survey.choices import (
    STRICT,
    BaseChoice,
    Choice,
    Judgement,
    MeanderChoice,
    Measured,
    ObstructionChoice,
    VegetationChoice,
)
from roughness.survey.stream import Reach
from roughness.survey.words import Bank
from roughness.trail.naming import FILE_NAME

Hash = Annotated[str, Field(pattern=r"^[0-9a-f]{64}$")]
SurveyId = Annotated[str, Field(pattern=r"^[0-9a-f]{32}$")]
FileName = Annotated[str, Field(pattern=f"^{FILE_NAME}$")]


@dataclass(frozen=True, kw_only=True)
class BeginSurvey:
    """The first line of a survey's trail."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    format: Literal[1]
    survey: SurveyId
    """128 random bits that every trail of the survey carries."""
    name: str


@dataclass(frozen=True, kw_only=True)
class DescribeSurvey:
    """What holds for the whole survey; a later line overrides key by key, null takes back."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    stream: str | None = None
    handbook: str | None = None
    length_unit: Literal["m", "km", "ft", "mi"] | None = None
    grows: Literal["upstream", "downstream"] | None = None
    """Where the distances along the stream grow to."""
    note: str | None = None
    same_person_may_accept: bool | None = None
    """Whether the one who estimated may also accept; every report then says so."""


@dataclass(frozen=True, kw_only=True)
class NotedReach(Reach):
    """A reach of the survey: where its trail is and how that trail begins."""

    file: FileName
    first_line: Hash


@dataclass(frozen=True, kw_only=True)
class Order:
    """The order of the reaches along the stream."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    reaches: tuple[str, ...]


@dataclass(frozen=True, kw_only=True)
class Heads:
    """The last lines of the reaches' trails at one moment: what lies before cannot be cut off."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    why: Literal["export", "report", "leaving", "acceptance"]
    heads: dict[str, Hash]
    """By the reach's name."""


@dataclass(frozen=True, kw_only=True)
class Withdraw:
    """Another line has no effect any more; withdrawing a withdrawal restores it."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    line: Hash


@dataclass(frozen=True, kw_only=True)
class BeginReach:
    """The first line of a reach's trail."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    format: Literal[1]
    survey: SurveyId
    reach: str
    """The reach's true name, whatever the file is called."""


@dataclass(frozen=True, kw_only=True)
class DescribeReach:
    """What holds for the reach; a later line overrides key by key, null takes back."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    reach_from: float | None = None
    reach_to: float | None = None
    slope: float | None = None
    position: tuple[tuple[float, float], ...] | None = None
    note: str | None = None


@dataclass(frozen=True, kw_only=True)
class SegmentShare:
    """A segment of a part (bed, banks) by its share of the wetted perimeter."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    name: str
    perimeter_percent: float


@dataclass(frozen=True, kw_only=True)
class Gate:
    """What is asked once per part and flow condition, before the factors."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    handbook: str
    depth_m: float | None = None
    """Mean depth in this part at this condition, m."""
    bank: Bank | None = None
    mobile_sand: bool | None = None
    visit: str | None = None
    segments: tuple[SegmentShare, ...] | None = None
    """Absent: one n is enough for the part."""
    measured: Measured | None = None


@dataclass(frozen=True, kw_only=True)
class CarriedFrom:
    """Where a carried choice was made."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    reach: str
    part: str
    condition: str


@dataclass(frozen=True, kw_only=True)
class Choose:
    """The choice for one factor; what the five kinds of it share."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    factor: Literal["base", "irregularity", "variation", "obstruction", "vegetation", "meander"]
    choice: Choice
    handbook: str
    handbook_sha256: Hash
    segment: str | None = None
    """Absent: the whole part."""
    carried_from: CarriedFrom | None = None
    """Set until somebody confirms the choice here."""


@dataclass(frozen=True, kw_only=True)
class ChooseBase(Choose):
    """The choice for the bed and bank material."""

    factor: Literal["base"]
    choice: BaseChoice


@dataclass(frozen=True, kw_only=True)
class ChooseShape(Choose):
    """The choice for the irregularity of the surface or the variation of the section."""

    factor: Literal["irregularity", "variation"]


@dataclass(frozen=True, kw_only=True)
class ChooseObstruction(Choose):
    """The choice for obstructions."""

    factor: Literal["obstruction"]
    choice: ObstructionChoice


@dataclass(frozen=True, kw_only=True)
class ChooseVegetation(Choose):
    """The choice for plants."""

    factor: Literal["vegetation"]
    choice: VegetationChoice


@dataclass(frozen=True, kw_only=True)
class ChooseMeander(Choose):
    """The choice for the multiplier."""

    factor: Literal["meander"]
    choice: MeanderChoice


@dataclass(frozen=True, kw_only=True)
class Estimated:
    """A whole estimate recorded at once: replaces every choice of its part and condition."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    handbook_sha256: Hash
    estimate: Judgement
    visit: str | None = None


@dataclass(frozen=True, kw_only=True)
class Adopt:
    """The n that goes to the model in place of the estimate."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    condition: str
    n: Annotated[float, Field(gt=0)]
    reason: str
    low: Annotated[float, Field(gt=0)] | None = None
    high: Annotated[float, Field(gt=0)] | None = None

    def __post_init__(self) -> None:
        low = self.n if self.low is None else self.low
        high = self.n if self.high is None else self.high
        if not low <= self.n <= high:
            raise ValueError(f"low <= n <= high is due, not {low} <= {self.n} <= {high}")
