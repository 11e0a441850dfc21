"""The gate: what is asked once per part and flow condition, before the factors."""

import re
from collections.abc import Callable, Mapping, Sequence

from textual import events
from textual.widget import Widget
from textual.widgets import Input

from roughness.desk.places import Place
from roughness.errors import InputError
from roughness.quantities.foreign_text import checked_name, printable, same_name_key
from roughness.quantities.measures import Quantity, read_known_measure
from roughness.quantities.printing import rounded, show_value
from roughness.screens.form import Field
from roughness.screens.pick import Pick
from roughness.screens.walk_form import WalkForm
from roughness.survey.choices import Measured
from roughness.survey.stream import Visit
from roughness.survey.words import Bank, Setting
from roughness.trail.data import Gate, SegmentShare

_USUAL_SHARES: dict[Setting, str] = {
    "channel": "bed 60, banks 40",
    "flood-plain": "meadow 60, trees 40",
}
_SEGMENT = re.compile(r"(.+?)[\s:]+(\d+(?:\.\d+)?)\s*%?")
_BANKS: dict[str, Bank] = {"in bank": "in bank", "over bank": "over bank"}
_MEASURED: tuple[tuple[str, str, Quantity], ...] = (
    ("width_m", "width of water", "length"),
    ("slope", "slope", "slope"),
    ("d50_mm", "grain size d50", "size"),
    ("d84_mm", "grain size d84", "size"),
    ("hydraulic_radius_m", "hydraulic radius", "length"),
    ("vegetation_height_m", "height of plants", "length"),
)
_USUAL_UNIT: dict[Quantity, str] = {"length": "m", "size": "mm", "slope": ""}
_HINTS: dict[Quantity, str] = {
    "length": "such as 1.4 m or 4.6 ft; empty: not known",
    "size": "such as 34 mm or 1.3 in; empty: not known",
    "slope": "such as 0.002 or 0.2 %; empty: not known",
}
_UNKNOWN, _ONE = "not known", "is enough"
_APART: dict[Setting, str] = {
    "channel": "no: bed and banks apart",
    "flood-plain": "no: strips apart",
}


class GateForm(WalkForm):
    """Depth, bank, sand, one n or bed and banks apart; all of it may stay unknown.

    Parameters
    ----------
    place : Place
        The part under the condition.
    visits : sequence of Visit
        The visits of the reach; the last one is taken unless another is picked.
    set_gate : function
        Keeps the answers.
    """

    def __init__(
        self, place: Place, visits: Sequence[Visit], set_gate: Callable[[Gate], object]
    ) -> None:
        def take(typed: Mapping[str, str]) -> bool:
            set_gate(gate_from(place, typed))
            return True

        self._is_channel = place.part.setting == "channel"
        own = place.state.gate if place.state else None
        # Shares of another flow condition go with its depth: here they are a suggestion.
        self._suggested = _shares(place) if own is None else _USUAL_SHARES[place.part.setting]
        where = f"{printable(place.part.part)}, {printable(place.condition.condition)}"
        says = "Enter goes on; what is not known stays empty. ↓ reaches what was measured."
        super().__init__(
            f"Before the factors: {where}",
            _fields(place, visits),
            take,
            says=says,
            does="to the factors",
        )

    def on_mount(self, event: events.Mount) -> None:  # type: ignore[override]  # noqa: ARG002
        """Show what is asked."""
        self._show_shares()

    def go_on(self) -> None:
        """Go on; the last question before the measured ones takes the form."""
        last = "shares" if self._apart else "apart"
        if self.focused is not None and self.focused.id == last:
            self._submit()
        else:
            super().go_on()

    @property
    def _apart(self) -> bool:
        return self.query_one("#apart", Pick).value != _ONE

    def on_pick_changed(self) -> None:
        """Ask for shares only where bed and banks are told apart."""
        self._show_shares()

    def on_input_changed(self, event: Input.Changed) -> None:
        """Suggest the shares from width and depth, as long as nobody typed them."""
        shares = self.query_one("#shares", Input)
        if event.input.id in ("depth_m", "width_m") and shares.value == self._suggested:
            shares.value = self._suggested = self._suggested_shares()

    def _show_shares(self) -> None:
        line = self.query_one("#shares").parent
        assert isinstance(line, Widget)
        line.display = self._apart

    def _suggested_shares(self) -> str:
        depth, width = (self._length(f"#{key}") for key in ("depth_m", "width_m"))
        if not depth or not width or not self._is_channel:
            return self._suggested
        # Wetted bed over bed and two upright banks: a rectangle of this width and depth.
        bed = int(rounded(100 * width / (width + 2 * depth), 0))
        return f"bed {bed}, banks {100 - bed}"

    def _length(self, field: str) -> float | None:
        try:
            return read_known_measure(self.query_one(field, Input).value, "length")
        except InputError:
            return None


def gate_from(place: Place, values: Mapping[str, str]) -> Gate:
    """Return the answers as they are recorded.

    Raises
    ------
    InputError
        Where a number or the shares cannot be read.
    """
    measured = {
        key: read_known_measure(values[key], quantity, label) for key, label, quantity in _MEASURED
    }
    known = place.state.measured if place.state else None
    # The reach's own slope stays with the reach, where it can be corrected.
    if (known is None or known.slope is None) and measured["slope"] == place.reach.slope:
        measured["slope"] = None
    kept = Measured(**measured, slope_along=known.slope_along if known else None)
    sand = values.get("sand", "")
    return Gate(
        part=place.part.part,
        condition=place.condition.condition,
        handbook=place.asked_handbook,
        depth_m=read_known_measure(values["depth_m"], "length", "mean depth"),
        bank=_BANKS.get(values["bank"]),
        mobile_sand={"yes": True, "no": False}.get(sand),
        visit=values.get("visit") or None,
        segments=shares_from(values["shares"]) if values["apart"] != _ONE else None,
        measured=kept if kept != Measured() else None,
    )


def shares_from(text: str) -> tuple[SegmentShare, ...]:
    """Read ``bed 60, banks 40``: names with their percent of the wetted perimeter.

    Raises
    ------
    InputError
        Where it is written otherwise, a name stands twice or the shares do not add to 100.

    >>> [(share.name, share.perimeter_percent) for share in shares_from("bed 60, banks 40 %")]
    [('bed', 60.0), ('banks', 40.0)]
    """
    wanted = "write names with their percent: bed 60, banks 40"
    found = []
    for piece in re.split("[,;]", text):
        match = _SEGMENT.fullmatch(piece.strip())
        if match is None:
            raise InputError(f"{printable(piece.strip())!r} cannot be read", wanted=wanted)
        found.append(
            SegmentShare(
                name=checked_name(match[1], "name of the segment"),
                perimeter_percent=float(match[2]),
            )
        )
    if len({same_name_key(share.name) for share in found}) < max(2, len(found)):
        raise InputError("two or more segments with different names are due", wanted=wanted)
    total = sum(share.perimeter_percent for share in found)
    if abs(total - 100) > 1 or min(share.perimeter_percent for share in found) <= 0:
        raise InputError(f"the shares add to {show_value(total)} %", wanted="100 % is due")
    return tuple(found)


def _fields(place: Place, visits: Sequence[Visit]) -> list[Field]:
    gate = place.state.gate if place.state else None
    is_channel = place.part.setting == "channel"
    bank = (gate.bank if gate else None) or place.condition.bank
    if bank is None and not is_channel:
        bank = "over bank"
    sand = gate.mobile_sand if gate else None
    names = [visit.visit for visit in reversed(visits)]
    fields = [
        Field(
            key="depth_m",
            label="Mean depth here",
            value=_shown(place.depth_m, "m"),
            hint="such as 1.4 m or 4.6 ft: shows what each grade does",
        ),
        Field(key="bank", label="The water is", value=bank or "", choices=(_UNKNOWN, *_BANKS)),
    ]
    if is_channel:
        fields += [
            Field(
                key="sand",
                label="Bed of moving sand",
                value={True: "yes", False: "no", None: _UNKNOWN}[sand],
                choices=(_UNKNOWN, "no", "yes"),
            )
        ]
    if len(names) > 1:
        visit = (gate.visit if gate else None) or names[0]
        fields += [Field(key="visit", label="Seen on the visit", value=visit, choices=tuple(names))]
    return [*fields, *_fields_of_segments(place), *_measured_fields(place)]


def _fields_of_segments(place: Place) -> list[Field]:
    apart = _APART[place.part.setting]
    return [
        Field(
            key="apart",
            label="One n",
            value=apart if place.segments else _ONE,
            choices=(_ONE, apart),
        ),
        Field(key="shares", label="% wetted perimeter", value=_shares(place)),
    ]


def _shares(place: Place) -> str:
    shares = ", ".join(f"{s.name} {show_value(s.perimeter_percent)}" for s in place.segments)
    return shares or _USUAL_SHARES[place.part.setting]


def _measured_fields(place: Place) -> list[Field]:
    return [
        Field(
            key=key,
            label=label.capitalize(),
            value=_shown(getattr(place.measured, key), _USUAL_UNIT[quantity]),
            hint=_HINTS[quantity],
        )
        for key, label, quantity in _MEASURED
    ]


def _shown(value: float | None, unit: str) -> str:
    return "" if value is None else f"{show_value(value)} {unit}".strip()
