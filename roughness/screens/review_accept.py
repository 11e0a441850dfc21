"""Accepting: what is about to be accepted, said in full before it is done."""

import asyncio
from collections.abc import Mapping, Sequence
from typing import Any, ClassVar

from rich.text import Text
from textual.app import App, ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical, VerticalScroll
from textual.screen import ModalScreen
from textual.widgets import Static

from roughness.custody import Refusal
from roughness.desk.identity import signing_key
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_range
from roughness.reasoning.factor_sentence import capital
from roughness.screens.form import Field, Form
from roughness.screens.review_places import ReviewPlaces
from roughness.screens.survey_lines import SurveyLine

_TALL = 34


def what_is_accepted(row: Row, unanswered: int) -> str:
    """Say what an acceptance is of: reach, part, flow condition, n, what stays unanswered."""
    assert row.estimate is not None
    told = f"{named(row)}: n {show_n(row.estimate.n.best)} ({show_range(row.estimate.n)})"
    told += f", estimated by {printable(row.estimated_by)}" if row.estimated_by else ""
    told += "."
    if row.adopted is not None:
        told += f" {show_n(row.adopted.n)} was adopted for the model and is accepted with it."
    if unanswered:
        some = (
            "1 finding that asks has" if unanswered == 1 else f"{unanswered} findings that ask have"
        )
        told += f" {some} no answer."
    return told + how_it_is_signed()


def how_it_is_signed() -> str:
    """Say that an acceptance will carry a signature, where this person has a key for it."""
    key = signing_key()
    return f" It will be signed with {printable(str(key))}." if key else ""


def named(row: Row) -> str:
    """Name a place as a person would: reach, part, flow condition."""
    names = [row.reach.reach, row.part.part if row.part else ""]
    names += [row.condition.condition if row.condition else ""]
    return ", ".join(printable(name) for name in names if name)


def overruling_form(
    reviewer: Reviewer, row: Row, refusals: Sequence[Refusal], says: str
) -> Form[bool]:
    """Ask why it is accepted although something speaks against it."""

    def take(typed: Mapping[str, str]) -> bool:
        reviewer.accept(row, overruling=typed["reason"], key=signing_key())
        return True

    against = "\n".join(f"! {capital(printable(refusal.says))}." for refusal in refusals)
    return Form(
        "Accept over what speaks against it?",
        [Field(key="reason", label="Reason", hint="why it is accepted all the same")],
        take,
        says=f"{says}\n{against}",
        does="accept over it",
    )


class AcceptAll(ModalScreen[bool]):
    """Everything that has nothing open, as a list; Enter accepts it in one step."""

    CSS_PATH: ClassVar[list[str]] = ["dialog.tcss", "review.tcss"]  # type: ignore[assignment]
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "answer(True)", "accept them"),
        Binding("escape", "answer(False)", "leave"),
        Binding("down", "scroll(1)", show=False),
        Binding("up", "scroll(-1)", show=False),
        Binding("pagedown", "scroll(10)", show=False),
        Binding("pageup", "scroll(-10)", show=False),
    ]

    def __init__(self, rows: Sequence[Row]) -> None:
        super().__init__()
        self._rows = rows

    def compose(self) -> ComposeResult:
        """Name every value that would be accepted."""
        count = len(self._rows)
        told = "1 value has" if count == 1 else f"{count} values have"
        with Vertical(classes="dialog"):
            says = f"{told} no open finding that stops or asks and no open question."
            says += f"{how_it_is_signed()} Accept?"
            yield Static(Text(says), classes="dialog--title")
            with VerticalScroll(can_focus=False):
                yield Static(Text("\n").join(_listed(row) for row in self._rows))
            yield Static(Text("⏎ accept them all   ↑↓ move   Esc leave them"), id="keys")

    def on_resize(self) -> None:
        """Show more of the list where there is room."""
        self.set_class(self.size.height >= _TALL, "-tall")

    def action_answer(self, yes: bool) -> None:
        """Close with the answer."""
        self.dismiss(yes)

    def action_scroll(self, by: int) -> None:
        """Move through the list."""
        self.query_one(VerticalScroll).scroll_relative(y=by, animate=False)


def _listed(row: Row) -> Text:
    assert row.estimate is not None
    n = f"n {show_n(row.estimate.n.best)} ({show_range(row.estimate.n)})"
    part = SurveyLine(row=row).part_word
    condition = printable(row.condition.condition) if row.condition else ""
    told = f"{n}  {printable(row.reach.reach)}, {part}, {condition}"
    return Text(told, no_wrap=True, overflow="ellipsis")


async def accept_all_clean(app: App[Any], pen: Recorder, places: ReviewPlaces) -> str:
    """List what can be accepted in one step, accept it if wanted, and say what was done."""
    reviewer = Reviewer(pen)
    places.look()
    try:
        clean = reviewer.clean(places.rows)
        if not clean:
            return "Nothing can be accepted in one step: something is open everywhere, or is yours."
        if not await app.push_screen_wait(AcceptAll(clean)):
            return "Nothing was accepted."
        lines = await asyncio.to_thread(reviewer.accept_all, clean, key=signing_key())
    except RoughnessError as error:
        return f"! {error}"
    finally:
        places.look()
    return f"Accepted: {len(lines)} values. u takes back one of them at a time."
