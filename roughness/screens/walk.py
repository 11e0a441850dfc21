"""The walk: one factor after another, each choice shown with what it does before it is made."""

from collections.abc import Callable
from typing import ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import Static

from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Question
from roughness.desk.recording import Recorder
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_value
from roughness.reasoning.factor_sentence import capital
from roughness.screens.evidence_drop import DropFolder
from roughness.screens.key_line import KeyLine
from roughness.screens.walk_at_hand import NoteDueError, SandDueError
from roughness.screens.walk_course import Course
from roughness.screens.walk_dialogs import WalkDialogs
from roughness.screens.walk_next import open_parts
from roughness.screens.walk_stack import FactorStack, names_of, origin_of
from roughness.screens.walk_sum import SumSoFar
from roughness.screens.walk_summary import CAUTIONS, Summary
from roughness.screens.walk_table import GradeTable, detail

_ROOM_FOR_BOTH = 34
_AT_A_FACTOR = frozenset(
    "take nudge widen values measured carry both digit".split()  # noqa: SIM905 -- read as words
)
_AT_THE_END = frozenset(("adopt", "unfold", "go_on"))


class WalkScreen(Screen[None]):
    """One part of one reach under one flow condition.

    Parameters
    ----------
    survey : SurveyFolder
        The survey.
    pen : Recorder
        Who writes.
    reach, part, condition : str
        Where; part and condition may be new.
    drop : DropFolder, optional
        The folder that is watched for photos; none is at first.

    Raises
    ------
    RoughnessError
        Where the reach cannot be read.
    """

    CSS_PATH = "walk.tcss"
    lead: ClassVar[str] = ""
    """Stands before where somebody is."""
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "take", "take"),
        Binding("enter", "go_on", "on"),
        Binding("left", "nudge(-1)", show=False),
        Binding("right", "nudge(1)", "value", key_display="←→"),
        Binding("shift+left", "widen(-1)", show=False),
        Binding("shift+right", "widen(1)", "range", key_display="⇧←→"),
        Binding("g", "adopt", "adopt another n"),
        Binding("space", "unfold", "all findings", key_display="Space"),
        Binding("n", "note", "note"),
        Binding("m", "measured", "measured"),
        Binding("c", "carry", "carry"),
        Binding("backspace", "back", "back"),
        Binding("u", "undo", "undo"),
        Binding("C", "carry_part", "carry all", key_display="C"),
        Binding("equals_sign", "values", "type", key_display="="),
        Binding("b", "gate", "depth"),
        Binding("f", "condition", "flow"),
        Binding("escape", "leave", "leave"),
        Binding("B", "both", show=False),
        Binding("h", "handbook", "handbook"),
        Binding("p", "evidence", "photos"),
        Binding("l", "timeline", "timeline"),
        Binding("question_mark", "why", "why"),
        Binding("up", "move(-1)", show=False),
        Binding("down", "move(1)", show=False),
        Binding("pageup", "page(-1)", show=False),
        Binding("pagedown", "page(1)", show=False),
        *(Binding(str(digit), f"digit({digit})", show=False) for digit in range(10)),
    ]

    def __init__(
        self,
        survey: SurveyFolder,
        pen: Recorder,
        reach: str,
        part: str,
        condition: str,
        *,
        drop: DropFolder | None = None,
    ) -> None:
        super().__init__()
        self.survey, self.pen, self.drop = survey, pen, drop or DropFolder()
        self.course = Course(survey, pen, reach, part, condition)
        self.dialogs = WalkDialogs(self)
        self._said = ("", 0)

    def compose(self) -> ComposeResult:
        """Lay out where, what was chosen, what is asked, and n so far."""
        yield Static("", id="crumbs", markup=False)
        yield FactorStack(id="stack")
        yield Static("", id="message", markup=False)
        yield Static("", id="question", markup=False)
        yield GradeTable(self.course, id="table")
        yield Summary(self.course, id="summary")
        yield Static("", id="walk-detail", markup=False)
        yield SumSoFar(id="sum")
        yield KeyLine()

    def on_mount(self) -> None:
        """Ask first what is asked before the factors."""
        self.draw()
        if self.course.needs_gate:
            self.dialogs.first_gate()

    def on_resize(self) -> None:
        """Use the room there is."""
        self.say()
        self.draw()

    # -- what is shown ----------------------------------------------------------------------

    @property
    def at_end(self) -> bool:
        """Whether every factor was asked and the summary is shown."""
        return self.course.question is None

    def walk_on(self, part: str, condition: str) -> None:
        """Go on to another part of the reach, or another condition, on the same screen."""
        self.course = Course(self.survey, self.pen, self.course.reach, part, condition)
        self.query_one(GradeTable).course = self.course
        self.query_one(Summary).course = self.course
        self.query_one(Summary).unfolded = False
        self.draw()
        if self.course.needs_gate:
            self.dialogs.first_gate()

    def draw(self) -> None:
        """Show everything anew, after a choice."""
        self.query_one("#crumbs", Static).update(self._crumbs())
        stack = self.query_one(FactorStack)
        stack.show(self.course)
        # The reasoning names every factor again: where lines are few, it has them.
        stack.display = not self.at_end or self.size.height >= _ROOM_FOR_BOTH
        self.query_one(SumSoFar).show(self.course)
        self.query_one(GradeTable).display = not self.at_end
        summary = self.query_one(Summary)
        summary.display = self.at_end
        if self.at_end:
            summary.show()
        self.query_one("#question", Static).update(self._question())
        self.draw_table()
        self.refresh_bindings()

    def draw_table(self) -> None:
        """Show the rows anew, after the cursor or a value moved."""
        self.query_one(GradeTable).refresh()
        told = Text(CAUTIONS, style="italic") if self.at_end else detail(self.course)
        self.query_one("#walk-detail", Static).update(told)

    def say(self, sentence: str = "") -> None:
        """Show one sentence until the next key."""
        if (sentence, self.size.width) == self._said:
            return
        self._said = sentence, self.size.width
        message = self.query_one("#message", Static)
        message.update(Text(printable(sentence), style="bold") if sentence else self._rule())

    def _rule(self) -> Text:
        return Text("─" * self.size.width, style="dim", no_wrap=True, overflow="crop")

    def _crumbs(self) -> Text:
        place = self.course.place
        gate = place.state.gate if place.state else None
        words = [place.reach.reach, place.part.part, place.condition.condition]
        line = Text(self.lead + " › ".join(printable(word) for word in words), style="bold")
        if place.depth_m is not None:
            line.append(f", {show_value(place.depth_m)} m deep")
        if gate and gate.bank:
            line.append(f", {gate.bank}")
        count = len(place.questions)
        told = "summary" if self.at_end else f"{self.course.number} of {count}"
        line.truncate(max(0, self.size.width - len(told) - 1), overflow="ellipsis", pad=True)
        return line + Text(f" {told}")

    def _question(self) -> Text:
        place, question = self.course.place, self.course.question
        if question is None:
            return self._what_next()
        table = place.handbook.table(place.part.setting, question[1])
        names = [segment.name for segment in place.segments]
        line = Text(f"{capital(names_of(question, names))}: ", style="bold")
        line.append(table.question)
        standing = self.course.standing
        if standing and (origin := origin_of(standing)):
            confirms = "" if standing.inherited_from else ": ⏎ confirms it"
            line.append(f" {capital(origin)}{confirms}.", style="italic")
        if standing and standing.choice.note:
            line.append(f" Note: {printable(standing.choice.note)}", style="italic")
        if self.course.said_apart:
            line.append(f" ! {self.course.said_apart}", style="bold")
        if count := self.course.evidence_count:
            told = "1 photo or document" if count == 1 else f"{count} photos or documents"
            line.append(f" {told}: p.", style="italic")
        return line

    def _what_next(self) -> Text:
        parts = open_parts(self.survey, self.course.place)
        if self.course.place.missing:
            return Text("⏎ on to the open factor", style="bold")
        if parts:
            return Text(f"⏎ on to {printable(parts[0])}   Esc back to the survey", style="bold")
        told = "All parts of this reach are done. Esc back to the survey; + there adds parts"
        return Text(told, style="bold")

    # -- keys -------------------------------------------------------------------------------

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:  # noqa: ARG002
        """Leave out the keys that do nothing now."""
        if action in _AT_THE_END:
            return self.at_end
        return not (self.at_end and action in _AT_A_FACTOR)

    def on_key(self) -> None:
        """Clear the last message."""
        self.say()

    def action_digit(self, digit: int) -> None:
        """Take a grade by its number.

        A binding like the other keys, so that fast typing keeps their order.
        """
        if 1 <= digit <= len(self.course.rows()):
            self.course.move_to(digit - 1)
            self.action_take()
        else:
            self.say(f"There is no grade {digit} here.")

    def action_take(self) -> None:
        """Keep the marked grade and go on."""
        self.say()
        question = self.course.question
        try:
            taken = self.course.take()
        except NoteDueError as due:
            self.dialogs.note_due(str(due))
            return
        except SandDueError:
            self.dialogs.sand()
            return
        except RoughnessError as error:
            self.say(f"! {error}")
            self.draw_table()
            return
        self.go_on_after(question, taken)

    def go_on_after(self, question: Question | None, taken: bool) -> None:
        """Go to the next open factor after one was taken, else just to the next one."""
        course, questions = self.course, self.course.place.questions
        at = questions.index(question) + 1 if question in questions else len(questions)
        if taken or at == len(questions):
            course.go_to_open()
        else:
            course.go_to(questions[at])
        self.draw()

    def action_go_on(self) -> None:
        """Go on from the summary: to a factor that is open again, or to the next part."""
        if self.course.place.missing:
            self.course.go_to_open()
            self.draw()
        elif parts := open_parts(self.survey, self.course.place):
            self._attempt(lambda: self.walk_on(parts[0], self.course.condition))
        else:
            self.say("No other part of this reach is open. Esc goes back to the survey.")

    def _attempt(self, step: Callable[[], None]) -> None:
        try:
            step()
        except RoughnessError as error:
            self.say(f"! {error}")

    def action_move(self, by: int) -> None:
        """Highlight another grade; at the end, scroll."""
        if self.at_end:
            self.query_one(Summary).scroll_relative(y=by, animate=False)
            return
        self.say()
        self.course.move_to(self.course.cursor + by)
        self.draw_table()

    def action_page(self, by: int) -> None:
        """Scroll by half a screen."""
        self.action_move(by * max(1, self.size.height // 3))

    def action_nudge(self, by: int) -> None:
        """Move the best value within its range."""
        self.say()
        if not self.course.is_marked:
            self.say("Mark a grade first: ↑↓.")
        elif not self.course.nudge(by):
            self.say("At the end of the range: ⇧→ widens it, = types other values.")
        self.draw_table()

    def action_widen(self, by: int) -> None:
        """Widen or narrow the range around the best value."""
        self.say()
        self.course.widen(by)
        self.draw_table()

    def action_back(self) -> None:
        """Go one factor back."""
        self.say()
        if not self.course.back():
            self.say("This is the first factor; b opens depth, bank and segments.")
        self.draw()

    def action_unfold(self) -> None:
        """Show all findings, or the first few."""
        summary = self.query_one(Summary)
        summary.unfolded = not summary.unfolded
        summary.show()

    def action_leave(self) -> None:
        """Drop what was moved but not taken; else go back to the survey."""
        if self.course.is_draft:
            self.course.go_to(self.course.question)
            self.say("What was typed or moved was not taken.")
            self.draw()
            return
        self.dismiss()

    def action_gate(self) -> None:
        """Open again what was asked before the factors."""
        self.dialogs.gate()

    def action_note(self) -> None:
        """Write a note: why this grade and value."""
        self.dialogs.note()

    def action_values(self) -> None:
        """Type low, best and high."""
        self.dialogs.values()

    def action_measured(self) -> None:
        """Type what was measured for this factor."""
        self.dialogs.measured()

    def action_carry(self) -> None:
        """Carry this factor over."""
        self.dialogs.carry()

    def action_carry_part(self) -> None:
        """Carry the whole part over."""
        self.dialogs.carry_part()

    def action_both(self) -> None:
        """Take both grades that a measure near their edge leaves."""
        self.dialogs.both()

    def action_undo(self) -> None:
        """Say what would be taken back, then take it back."""
        self.dialogs.undo()

    def action_condition(self) -> None:
        """Walk another flow condition of this part."""
        self.dialogs.condition()

    def action_adopt(self) -> None:
        """Let another n go to the model, with the reason."""
        self.dialogs.adopt()

    def action_why(self) -> None:
        """Explain the factor at hand and the keys."""
        self.dialogs.why()

    def action_handbook(self) -> None:
        """Open the published tables."""
        self.dialogs.handbook()

    def action_evidence(self) -> None:
        """Open the photos and documents of the reach, those of the factor at hand first."""
        self.dialogs.evidence()

    def action_timeline(self) -> None:
        """Tell who said what about this reach."""
        self.dialogs.timeline()
