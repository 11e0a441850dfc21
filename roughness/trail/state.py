"""What a trail says now: the state of a reach and of a survey. Plain frozen dataclasses."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from roughness.quantities.foreign_text import same_name_key
from roughness.survey.choices import Choice, Factors, Measured
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.survey.words import Factor, Setting, Shape
from roughness.trail.data import CarriedFrom, DescribeSurvey, Gate, Heads, NotedReach, SegmentShare
from roughness.trail.lines import Line
from roughness.trail.reading import Fault
from roughness.trail.review_state import NOT_REVIEWED, Filed, ReviewState

Segments = Mapping[str | None, Mapping[Factor, "Chosen"]]


@dataclass(frozen=True, kw_only=True)
class Chosen:
    """The choice that stands for one factor, and where it comes from."""

    choice: Choice
    handbook: str
    handbook_sha256: str
    carried_from: CarriedFrom | None = None
    """Set while a carried choice was not confirmed here."""
    visit: str | None = None
    line: Line
    """The line that said so: its hash, who and when."""


@dataclass(frozen=True, kw_only=True)
class Adopted:
    """The n that goes to the model in place of the estimate."""

    n: float
    low: float | None
    high: float | None
    reason: str
    line: Line
    """The line that said so; ``line.prev`` is what its author had seen."""


@dataclass(frozen=True, kw_only=True)
class PartState:
    """One part of the reach under one flow condition."""

    part: str
    condition: str
    gate: Gate | None = None
    """The answers before the factors; None where nobody was asked."""
    gate_line: Line | None = None
    handbook: str | None = None
    """Key of the handbook that the last line named."""
    setting: Setting | None = None
    """As a recorded estimate said it; the part itself says it too."""
    segments: tuple[SegmentShare, ...] | None = None
    """Bed and banks told apart; None where one n is enough."""
    choices: Segments = field(default_factory=dict)
    """By segment (None: the whole part), then by factor. Choices for segments that do not
    exist any more are not here; those for the whole part stay beside segments."""
    measured: Measured | None = None
    shape: Shape = "triangular"
    dependence: float = 0.5
    visit: str | None = None
    """The visit that the last gate or estimate named."""
    adopted: Adopted | None = None
    last_line: Line
    """The last line about this part and condition."""

    @property
    def last_by(self) -> str:
        """Who said the last thing about it."""
        return self.last_line.by

    @property
    def last_at(self) -> str:
        """When the last thing was said about it."""
        return self.last_line.at

    def factors(self, segment: str | None = None) -> Factors:
        """Return the choices of a segment, or of the whole part, without their origin."""
        chosen = {factor: c.choice for factor, c in self.choices.get(segment, {}).items()}
        return Factors(**chosen)  # type: ignore[arg-type]

    def judged_like(self, other: "PartState | None") -> bool:
        """Whether both rest on the same answers and choices, whoever gave them and when."""
        return other is not None and self._basis() == other._basis()

    def _basis(self) -> object:
        # A carried choice that is confirmed unchanged gives the same n.
        choices = {
            segment: {
                factor: (c.choice, c.handbook, c.handbook_sha256) for factor, c in by_factor.items()
            }
            for segment, by_factor in self.choices.items()
            if by_factor
        }
        return (
            choices,
            self.segments,
            self.measured,
            self.shape,
            self.dependence,
            self.gate and (self.gate.depth_m, self.gate.bank, self.gate.mobile_sand),
        )


@dataclass(frozen=True, kw_only=True)
class ReachState:
    """What the trail of a reach says now."""

    reach: Reach
    """Name, distances, slope, position, note."""
    survey: str = ""
    """Id of the survey, 32 hexadecimal digits."""
    first_line: str = ""
    parts: tuple[Part, ...] = ()
    visits: tuple[Visit, ...] = ()
    places: Mapping[tuple[str, str], PartState] = field(default_factory=dict)
    """By (part, condition), both as :func:`same_name_key` gives them, in order of appearance."""
    reviews: Mapping[tuple[str, str], ReviewState] = field(default_factory=dict)
    """By (part, condition), as the places."""
    evidence: tuple[Filed, ...] = ()
    """Photos and documents, each as the last line about it says."""
    last_touched: tuple[str, str] | None = None
    """Part and condition of the last line about any: where to come back to."""
    effective: tuple[Line, ...] = ()
    """The lines that have an effect, in order."""
    withdrawn: frozenset[str] = frozenset()
    """Hashes of the lines that were taken back."""
    unknown: tuple[Line, ...] = ()
    """Lines of kinds that this version does not know; kept and shown."""
    unusable: tuple[Fault, ...] = ()
    """Lines of a known kind whose data does not fit it; without effect."""

    def place(self, part: str, condition: str) -> PartState | None:
        """Return the state of a part under a condition, names compared as people would."""
        return self.places.get((same_name_key(part), same_name_key(condition)))

    def review(self, part: str, condition: str) -> ReviewState:
        """Return the review of a part under a condition; an empty one where nobody reviewed."""
        key = same_name_key(part), same_name_key(condition)
        return self.reviews.get(key, NOT_REVIEWED)


@dataclass(frozen=True, kw_only=True)
class SurveyState:
    """What the survey's own trail says now."""

    name: str = ""
    survey: str = ""
    """Id of the survey, 32 hexadecimal digits."""
    first_line: str = ""
    described: DescribeSurvey = field(default_factory=DescribeSurvey)
    conditions: tuple[FlowCondition, ...] = ()
    condition_lines: Mapping[str, Line] = field(default_factory=dict)
    """The line that last said what a condition is, by its name."""
    reaches: tuple[NotedReach, ...] = ()
    """In the order of the stream; reaches that no order names come last."""
    heads: tuple[tuple[Line, Heads], ...] = ()
    """Noted last lines of the reaches' trails, oldest first."""
    effective: tuple[Line, ...] = ()
    withdrawn: frozenset[str] = frozenset()
    unknown: tuple[Line, ...] = ()
    unusable: tuple[Fault, ...] = ()

    def condition(self, name: str) -> FlowCondition | None:
        """Return a flow condition, its name compared as people would."""
        wanted = same_name_key(name)
        return next((c for c in self.conditions if same_name_key(c.condition) == wanted), None)

    def reach(self, name: str) -> NotedReach | None:
        """Return a reach of the survey, its name compared as people would."""
        wanted = same_name_key(name)
        return next((r for r in self.reaches if same_name_key(r.reach) == wanted), None)
