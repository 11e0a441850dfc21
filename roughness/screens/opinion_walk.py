"""The walk of a second opinion: the same questions, on a copy that holds nothing of the first."""

from collections.abc import Mapping
from typing import Any, ClassVar, Final

from rich.text import Text
from textual.binding import Binding, BindingType

from roughness.desk.blind_copy import judged
from roughness.desk.evidence_lists import evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.desk.opinions import give_opinion
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.errors import RoughnessError
from roughness.screens.form import Field, Form
from roughness.screens.menu import Confirm
from roughness.screens.photo import PhotoScreen
from roughness.screens.typed import text_or_none
from roughness.screens.walk import WalkScreen
from roughness.trail.lines import Line

_NO, _YES = "no", "yes"
SEEN: Final = "Not blind: the first n was seen before."
_NOT_HERE = frozenset(("adopt", "carry", "carry_part", "condition"))


class BlindWalk(WalkScreen):
    """Walks a blind copy of a place; at its end the judgement is given as one line.

    Parameters
    ----------
    copy : SurveyFolder
        What :func:`roughness.desk.blind_copy.blind_copy` made.
    pen : Recorder
        Who gives the opinion, and to which survey.
    place : Place
        The place in that survey.
    """

    lead = "Blind: "
    BINDINGS: ClassVar[list[BindingType]] = [Binding("q", "leave", show=False)]

    def __init__(self, copy: SurveyFolder, pen: Recorder, place: Place) -> None:
        here = place.reach.reach, place.part.part, place.condition.condition
        super().__init__(copy, Recorder(copy, pen.by), *here)
        self.given: Line | None = None
        """The line of the opinion, once it is recorded."""
        self._own_pen, self._place = pen, place
        self._was_warned = False

    def on_mount(self) -> None:
        """Ask what is asked before the factors, with the facts that are known filled in."""
        self.dialogs.first_gate()

    def warn_before_quitting(self) -> bool:
        """Say once that nothing is recorded yet; True where the program shall stay open."""
        if self._was_warned:
            return False
        self._was_warned = True
        self.notify(
            "Your second opinion is not recorded yet. Ctrl+Q again leaves without it.",
            severity="warning",
            timeout=8,
        )
        return True

    def _what_next(self) -> Text:
        if self.course.place.missing:
            return Text("⏎ on to the open factor", style="bold")
        return Text("⏎ give it as your second opinion   Esc leave without", style="bold")

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        """Leave out what would need the first estimate, or other places."""
        return action not in _NOT_HERE and super().check_action(action, parameters)

    def action_go_on(self) -> None:
        """Go on to a factor that is open again, else give the opinion."""
        if self.course.place.missing:
            super().action_go_on()
        else:
            self._run(self._give)

    def action_leave(self) -> None:
        """Drop what was moved but not taken; else ask whether to leave without an opinion."""
        if self.course.is_draft:
            super().action_leave()
        else:
            self._run(self._leave)

    def action_evidence(self) -> None:
        """Look at the photos, without the words of whoever attached them."""
        items = evidence_of(self.survey, self.course.reach)
        if items:
            self.app.push_screen(PhotoScreen(items))
        else:
            self.say("There is no photo of this place.")

    def _run(self, steps: Any) -> None:
        self.run_worker(steps(), exclusive=True, group="dialog")

    async def _leave(self) -> None:
        told = (
            "Nothing was recorded, and what you chose here is lost when you leave: a second"
            " opinion is kept whole at its end, or not at all."
        )
        if await self.app.push_screen_wait(Confirm("Leave without a second opinion?", told)):
            self.dismiss()

    async def _give(self) -> None:
        try:
            self.given = await self.app.push_screen_wait(self._form())
        except RoughnessError as error:
            self.say(f"! {error}")
        if self.given is not None:
            self.dismiss()

    def _form(self) -> Form[Line]:
        place = self._place
        here = place.reach.reach, place.part.part, place.condition.condition

        def take(typed: Mapping[str, str]) -> Line:
            _, judgement = judged(self.survey, place)
            told = [SEEN] if typed["seen"] == _YES else []
            told += [note] if (note := text_or_none(typed["note"])) else []
            now = place_of(self._own_pen.survey, *here)
            return give_opinion(self._own_pen, now, judgement, note=" ".join(told) or None)

        return Form(
            "Give it as your second opinion",
            [
                Field(key="note", label="Note", hint="why n is as you judge it"),
                Field(key="seen", label="Seen the first n", choices=(_NO, _YES)),
            ],
            take,
            says="It is recorded beside the first estimate and does not change it. Say honestly"
            " whether you had seen that one, in the list of reaches for instance.",
            does="record it",
        )
