"""The forms of the walk: they start in their first field, what stands there selected."""

from textual import events
from textual.widgets import Input

from roughness.screens.form import Form


class WalkForm(Form[bool]):
    """A form that starts at the top, so that Enter walks through all of it."""

    def on_mount(self, event: events.Mount) -> None:  # type: ignore[override]
        """Start in the first field, and not in the first empty one as other forms do."""
        event.prevent_default()
        first = self.query_one(f"#{self._fields[0].key}")
        first.focus()
        if isinstance(first, Input):
            self.call_after_refresh(first.action_select_all)

    def action_next(self) -> None:
        """Go on, behind the keys that still wait for the field: Enter overtakes what was typed."""
        if self.focused is not None:
            self.focused.call_later(self.go_on)

    def go_on(self) -> None:
        """Go to the next field, or take the form from its last one."""
        super().action_next()
