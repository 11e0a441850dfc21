"""A dialog with a few fields. What does not fit is said; nothing typed is lost."""

import asyncio
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import ClassVar, Generic, TypeVar

from rich.text import Text
from textual import work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal, Vertical, VerticalScroll
from textual.screen import ModalScreen
from textual.widget import Widget
from textual.widgets import Input, Static, TextArea

from roughness.errors import RoughnessError
from roughness.screens.pick import Pick

T = TypeVar("T")


@dataclass(frozen=True, kw_only=True)
class Field:
    """One thing that is asked."""

    key: str
    label: str
    value: str = ""
    hint: str = ""
    """Stands in the empty field."""
    choices: tuple[str, ...] = ()
    """Fixed words to pick from; free text where there are none."""
    many_lines: bool = False


class Take(Static, can_focus=True):
    """The line at the end of a form that takes it."""


class Form(ModalScreen[T | None], Generic[T]):
    """Asks for a few things at once; the result is what ``take`` makes of them.

    Parameters
    ----------
    title : str
        What it is about.
    fields : sequence of Field
        What is asked, from top to bottom.
    take : function
        Gets the texts by key; returns the result or raises RoughnessError, whose sentence
        is shown while the form stays open.
    says : str
        A sentence under the title.
    does : str
        What taking it does, in a word or two.
    slow : bool
        Whether ``take`` may last: then it runs aside, and touches nothing that is open here.
    """

    CSS_PATH = "dialog.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "leave", "leave"),
        # Before the field sees it: what is typed next belongs to the next field already.
        Binding("enter", "next", "next", show=False, priority=True),
        Binding("down", "app.focus_next", "next", show=False),
        Binding("up", "app.focus_previous", "previous", show=False),
    ]

    def __init__(
        self,
        title: str,
        fields: Sequence[Field],
        take: Callable[[Mapping[str, str]], T],
        *,
        says: str = "",
        does: str = "take it",
        slow: bool = False,
    ) -> None:
        super().__init__()
        self._slow, self._busy = slow, False
        self._heading, self._fields, self._take = title, fields, take
        self._says, self._does = says, does

    def compose(self) -> ComposeResult:
        """Lay the fields out, a line each."""
        with Vertical(classes="dialog"):
            yield Static(Text(self._heading), classes="dialog--title")
            if self._says:
                yield Static(Text(self._says), classes="dialog--says")
            with VerticalScroll(can_focus=False, classes="dialog--fields"):
                for field in self._fields:
                    with Horizontal(classes="many" if field.many_lines else "one"):
                        yield Static(Text(field.label), classes="dialog--label")
                        yield _widget_of(field)
                yield Take(Text(f"[ {self._does} ]"), id="take")
            yield Static("", id="wrong")
            yield Static(Text("Tab ↑↓ move   ⏎ next, in the last: take   Esc leave"), id="keys")

    def on_mount(self) -> None:
        """Start in the first field that is still empty."""
        empty = next((f for f in self._fields if not f.value and not f.choices), self._fields[0])
        self.query_one(f"#{empty.key}").focus()

    def on_screen_resume(self) -> None:
        """Take away the messages that would lie over the fields."""
        self.app.clear_notifications()

    def check_action(self, action: str, _: tuple[object, ...]) -> bool | None:
        """Leave Enter to a field of many lines."""
        return action != "next" or not isinstance(self.focused, TextArea)

    def action_next(self) -> None:
        """Go to the next field, or take the form from its last one."""
        last = f"#{self._fields[-1].key}"
        if self.focused is not None and self.focused in (self.query_one(last), self._taking):
            # Behind the keys that wait for the field: typing fast must not lose its end.
            self.focused.call_later(self._submit)
        else:
            self.focus_next()

    def action_leave(self) -> None:
        """Close without doing anything."""
        self.dismiss(None)

    def on_click(self) -> None:
        """A click on the last line takes the form."""
        if self._taking.has_focus:
            self._submit()

    @property
    def _taking(self) -> Widget:
        return self.query_one("#take")

    def _submit(self) -> None:
        typed = {field.key: self._value(field) for field in self._fields}
        if self._slow:
            self._take_aside(typed)
            return
        try:
            result = self._take(typed)
        except RoughnessError as error:
            self._say(str(error))
            return
        self.dismiss(result)

    @work(group="aside")
    async def _take_aside(self, typed: Mapping[str, str]) -> None:
        if self._busy:
            return
        self._busy = True
        self._say("Working...")
        try:
            result = await asyncio.to_thread(self._take, typed)
        except RoughnessError as error:
            self._say(str(error))
            return
        finally:
            self._busy = False
        self.dismiss(result)

    def _say(self, sentence: str) -> None:
        self.query_one("#wrong", Static).update(Text(sentence))

    def _value(self, field: Field) -> str:
        widget = self.query_one(f"#{field.key}")
        if isinstance(widget, TextArea):
            return widget.text
        assert isinstance(widget, Input | Pick)
        return widget.value


def _widget_of(field: Field) -> Widget:
    if field.choices:
        return Pick(field.choices, field.value, id=field.key)
    if field.many_lines:
        return TextArea(
            field.value,
            id=field.key,
            compact=True,
            highlight_cursor_line=False,
            placeholder=field.hint,
        )
    return Input(field.value, placeholder=field.hint, id=field.key, compact=True)
