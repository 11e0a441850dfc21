"""The fold over the lines about one part under one flow condition."""

from typing import Any, Final

from roughness.quantities.foreign_text import same_name_key
from roughness.survey.choices import Factors, Measured
from roughness.survey.words import Factor, Setting, Shape
from roughness.trail.data import Adopt, Choose, Estimated, Gate, SegmentShare
from roughness.trail.lines import Line
from roughness.trail.review_data import Consensus
from roughness.trail.state import Adopted, Chosen, PartState

PLACE_KINDS: Final = frozenset({"gate", "choose", "estimate", "consensus", "adopt"})


class PlaceBeingTold:
    """Takes the lines about one part and condition one by one; :meth:`state` sums up."""

    def __init__(self, part: str, condition: str) -> None:
        self.part, self.condition = part, condition
        self._gate: tuple[Gate, Line] | None = None
        self._handbook: str | None = None
        self._setting: Setting | None = None
        self._segments: tuple[SegmentShare, ...] | None = None
        # By segment as names are compared, "" for the whole part.
        self._choices: dict[str, dict[Factor, Chosen]] = {}
        self._measured: Measured | None = None
        self._shape: Shape = "triangular"
        self._dependence = 0.5
        self._visit: str | None = None
        self._adopted: Adopted | None = None
        self._last: Line | None = None

    def tell(self, line: Line, data: Any) -> None:
        """Take in one more line: a gate, choice, estimate, consensus, adopted value."""
        self._last = line
        if isinstance(data, Gate):
            self._tell_gate(line, data)
        elif isinstance(data, Choose):
            self._tell_choice(line, data)
        elif isinstance(data, Estimated | Consensus):
            self._tell_estimate(line, data)
        elif isinstance(data, Adopt):
            self._adopted = Adopted(
                n=data.n, low=data.low, high=data.high, reason=data.reason, line=line
            )

    def _tell_gate(self, line: Line, gate: Gate) -> None:
        self._gate = gate, line
        self._handbook, self._segments = gate.handbook, gate.segments
        self._visit = gate.visit or self._visit
        self._measured = gate.measured or self._measured

    def _tell_choice(self, line: Line, data: Choose) -> None:
        self._handbook = data.handbook
        self._choices.setdefault(same_name_key(data.segment or ""), {})[data.factor] = Chosen(
            choice=data.choice,
            handbook=data.handbook,
            handbook_sha256=data.handbook_sha256,
            carried_from=data.carried_from,
            visit=self._visit,
            line=line,
        )

    def _tell_estimate(self, line: Line, data: Estimated | Consensus) -> None:
        estimate = data.estimate
        self._handbook, self._setting = estimate.handbook, estimate.setting
        self._measured = estimate.measured
        if isinstance(data, Estimated):
            self._visit = data.visit or self._visit
        self._shape, self._dependence = estimate.shape, estimate.dependence
        self._segments = None
        told: dict[str, Factors] = {"": estimate.factors} if estimate.factors else {}
        if estimate.segments:
            self._segments = tuple(
                SegmentShare(name=s.name, perimeter_percent=s.perimeter_percent)
                for s in estimate.segments
            )
            told = {same_name_key(s.name): s.factors for s in estimate.segments}
        self._choices = {
            segment: {
                factor: Chosen(
                    choice=choice,
                    handbook=estimate.handbook,
                    handbook_sha256=data.handbook_sha256,
                    visit=self._visit,
                    line=line,
                )
                for factor, choice in factors
            }
            for segment, factors in told.items()
        }

    def state(self) -> PartState:
        """Return what the lines so far say."""
        assert self._last is not None, "a place is there because a line told of it"
        names: dict[str, str | None] = {"": None}
        names |= {same_name_key(s.name): s.name for s in self._segments or ()}
        return PartState(
            part=self.part,
            condition=self.condition,
            gate=self._gate[0] if self._gate else None,
            gate_line=self._gate[1] if self._gate else None,
            handbook=self._handbook,
            setting=self._setting,
            segments=self._segments,
            choices={
                name: dict(self._choices[key])
                for key, name in names.items()
                if key in self._choices
            },
            measured=self._measured,
            shape=self._shape,
            dependence=self._dependence,
            visit=self._visit,
            adopted=self._adopted,
            last_line=self._last,
        )
