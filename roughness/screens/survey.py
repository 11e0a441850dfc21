"""The survey: its reaches with their n on one shared axis, and everything that adds to it."""

import asyncio
import gc
from time import monotonic
from typing import ClassVar, Final

from rich.text import Text
from textual import on, work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import Input, Static

from roughness.desk.places import Place
from roughness.desk.recording import Recorder, now
from roughness.desk.resuming import LeftAt, left_at, left_unfinished
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens import survey_text
from roughness.screens.adding import Adding
from roughness.screens.evidence_drop import DropFolder
from roughness.screens.file_watch import FileWatch
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import SURVEY_HELP
from roughness.screens.key_line import KeyLine
from roughness.screens.menu import Menu
from roughness.screens.opinion import without_first
from roughness.screens.reach_list import ReachList
from roughness.screens.survey_lines import SurveyLine, SurveyLines
from roughness.screens.uniting import Uniting

_SLICE_S: Final = 0.008
# Whoever moves about does not wait for reaches that are not on the screen.
_HANDS_OFF_S: Final = 0.15
_SHOW_EVERY_S: Final = 0.3
_LOOK_EVERY_S: Final = 2.0
_SMALL: Final = 60
_TALL: Final = 34


class SurveyScreen(Screen[None]):
    """The reaches of one survey.

    Parameters
    ----------
    pen : Recorder
        Who writes, and to which survey.
    walk_at_once : bool
        Whether the walk opens over it, at the part that was begun and is not done.
    """

    CSS_PATH = "survey.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "walk", "walk"),
        Binding("plus", "add", "add"),
        Binding("slash", "filter", "filter"),
        Binding("r", "review", "review"),
        Binding("w", "weak_first", "weak"),
        Binding("g", "adopt", "adopt"),
        Binding("u", "undo", "undo"),
        Binding("e", "export", "export"),
        Binding("p", "evidence", "photos"),
        Binding("question_mark", "help", "help"),
        Binding("h", "handbook", "handbook"),
        Binding("f", "condition", "flow"),
        Binding("o", "opinion", "second opinion"),
        Binding("l", "timeline", "timeline"),
        Binding("M", "unite", "unite", key_display="M"),
        Binding("escape", "back", "back", show=False),
    ]

    def __init__(self, pen: Recorder, *, walk_at_once: bool = False) -> None:
        super().__init__()
        self._walk_at_once = walk_at_once
        self.pen, self.survey = pen, pen.survey
        self.lines = SurveyLines(pen.survey)
        self.condition: str | None = None
        self._weak_first = False
        self._progress = ""
        self._moved = False
        self._pressed = 0.0
        self._watch = FileWatch(pen.survey)
        self._adding = Adding(self)
        self._uniting = Uniting(self)
        self.drop = DropFolder()
        self._hidden: Place | None = None
        self._others = ""
        self._repaired, self._unlocked = pen.repaired, pen.unlocked

    def compose(self) -> ComposeResult:
        """Lay out head, filter, list and detail."""
        yield Static("", id="title")
        yield Static("", id="counts")
        yield Input(placeholder="words of a reach, part or status", id="filter", compact=True)
        yield ReachList(id="reaches")
        yield Static("", id="detail")
        yield Static("", id="banner")
        yield KeyLine()

    def on_mount(self) -> None:
        """Read the survey, come back to the place last worked on, say who else is in."""
        self.query_one("#filter").display = False
        self.query_one(ReachList).focus()
        self._greet(self.survey.lock.enter(self.pen.by, now()))
        if len(self.lines.names) <= _SMALL:
            self.lines.read(self.lines.names)
            self.lines.find_over_survey()
            unfinished = left_unfinished(self.survey) if self._walk_at_once else None
            last = unfinished or left_at(self.survey)
            self._come_back(last)
            if last is not None and self._walk_at_once:
                self._adding.open_walk(last.reach, last.part, last.condition)
        else:
            self._come_back(None)
            self._read_on(self.lines.names)
        self.set_interval(_LOOK_EVERY_S, self.look_for_changes)

    def leave(self) -> str:
        """Note the ends of the trails; returns what went wrong, if anything did."""
        self.workers.cancel_node(self)
        try:
            self.pen.note_heads("leaving")
        except RoughnessError as error:
            return str(error)
        finally:
            self.survey.lock.leave()
        return ""

    # -- what is shown ----------------------------------------------------------------------

    @property
    def selected(self) -> SurveyLine | None:
        """The line under the cursor."""
        return self.query_one(ReachList).line

    def draw(self, at: tuple[str, str] | None = None) -> None:
        """Show the lines as they are now; ``at`` moves the cursor to a reach and part."""
        names = self.lines.conditions
        if self.condition not in names:
            self.condition = names[0] if names else None
        filtered = self.query_one("#filter", Input).value
        lines = self.lines.lines(self.condition, filtered=filtered, weak_first=self._weak_first)
        lines = [without_first(line, self._hidden) for line in lines]
        apart = self._weak_first or bool(filtered)
        self.query_one(ReachList).show(lines, names_on_every_line=apart, at=at)
        self._draw_head()

    def hide(self, place: Place | None) -> None:
        """Show nothing of a place from now on, while somebody judges it blind; None ends it."""
        self._hidden = place
        if self.query(ReachList):  # nothing is left to draw on when the program is left
            self.draw()

    def _draw_head(self) -> None:
        width = max(20, self.size.width)
        self.query_one("#title", Static).update(
            survey_text.title_line(
                self.survey, self.condition, len(self.lines.conditions) > 1, width
            )
        )
        progress = self._progress or ("weak points first" if self._weak_first else "")
        counts = self.lines.counts(self.condition)
        self.query_one("#counts", Static).update(survey_text.counts_line(counts, progress))
        told = (self._read_only(), self._uniting.sentence(), self._others)
        banner = "; ".join(one for one in told if one)
        self.query_one("#banner", Static).update(Text(banner, no_wrap=True, overflow="ellipsis"))
        if self.query_one("#banner").display != bool(banner):
            self.query_one("#banner").display = bool(banner)
            self.refresh_bindings()

    def _read_only(self) -> str:
        trail = self.survey.trail()
        if trail.broken:
            return f"read-only, the survey's trail is broken: {printable(str(trail.broken[0]))}"
        if trail.to_be_merged:
            return ""  # what lies apart is told with the reaches
        return "read-only: a newer version of the tool wrote this survey" if trail.newer else ""

    @on(ReachList.Moved)
    def _tell_detail(self, event: ReachList.Moved) -> None:
        if event.by_person:
            self._moved, self._pressed = True, monotonic()
        if event.line is not None and not event.line.read and not self._reading:
            self._read(self.query_one(ReachList).visible_reaches())
            return
        room = 8 if self.size.height >= _TALL else 5
        text = survey_text.detail_text(event.line, room, max(20, self.size.width))
        self.query_one("#detail", Static).update(text)

    def on_resize(self) -> None:
        """Write head and detail anew for the new width."""
        if self.lines.names or self.is_mounted:
            self._draw_head()
            self.post_message(ReachList.Moved(self.selected))

    # -- reading ----------------------------------------------------------------------------

    @property
    def _reading(self) -> bool:
        return bool(self._progress)

    @work(exclusive=True, group="reading")
    async def _read_on(self, names: list[str]) -> None:
        """Read many reaches in short slices, what is on the screen first."""
        pending, total, shown = names, len(names), monotonic()
        try:
            while pending:
                seen = set(self.query_one(ReachList).visible_reaches()) & set(pending)
                wanted = [*(name for name in pending if name in seen)] or pending
                done = set(wanted[: self.lines.read(wanted, _SLICE_S)])
                pending = [name for name in pending if name not in done]
                self._progress = survey_text.progress_of(total - len(pending), total)
                if seen or monotonic() - shown > _SHOW_EVERY_S:
                    self.draw()
                    shown = monotonic()
                await asyncio.sleep(0)
                while not seen and monotonic() - self._pressed < _HANDS_OFF_S:
                    await asyncio.sleep(_SLICE_S)
            # The trails of thousands of reaches stay; collecting over them stalls the keys.
            gc.freeze()
            found = await asyncio.to_thread(self.lines.found_over_survey, self.lines.rows())
            self.lines.take(found)
            last = await asyncio.to_thread(left_at, self.survey)
        finally:
            self._progress = ""
        if self._moved:
            self.draw()
        else:
            self._come_back(last)

    def _read(self, names: list[str]) -> None:
        if names:
            self.lines.read(names)
        if not self._reading and not self.lines.unread:
            self.lines.find_over_survey()
        self.draw()

    def _come_back(self, last: LeftAt | None) -> None:
        if last is not None:
            self.condition = last.condition
        self.draw(at=(last.reach, last.part) if last else None)
        self._moved = False

    def look_for_changes(self) -> None:
        """Read again what somebody (or this screen) wrote since the last look."""
        self._greet(self.survey.lock.others())
        self._warn()
        self._uniting.look()
        changed = self._watch.changed()
        if changed is None:
            return
        if len(changed) > _SMALL:
            self._read_on(changed)
        else:
            self._read(changed)

    def _warn(self) -> None:
        """Say once what writing brought to light about the files."""
        told = []
        if self.pen.repaired > self._repaired:
            told.append("A line that was cut off was moved aside, to a file ending in .torn.")
        if self.pen.unlocked and not self._unlocked:
            told.append("There are no locks on this disk: let one person write at a time.")
        self._repaired, self._unlocked = self.pen.repaired, self.pen.unlocked
        for sentence in told:
            self.notify(sentence, severity="warning", timeout=10)

    def _greet(self, others: tuple[object, ...]) -> None:
        names = ", ".join(str(one) for one in others)
        told = f"also in this survey: {names}" if names else ""
        if told != self._others:
            self._others = told
            if self.is_mounted:
                self._draw_head()

    def on_screen_resume(self) -> None:
        """Come back from the walk or a dialog: show what was written there."""
        self.look_for_changes()

    # -- keys -------------------------------------------------------------------------------

    def action_filter(self) -> None:
        """Open the filter; the list follows as it is typed."""
        self.query_one("#filter").display = True
        self.query_one("#filter").focus()

    @on(Input.Changed, "#filter")
    def _filtered(self) -> None:
        self.draw()

    @on(Input.Submitted, "#filter")
    def _filter_done(self) -> None:
        self.query_one("#filter").display = bool(self.query_one("#filter", Input).value)
        self.query_one(ReachList).focus()

    def action_back(self) -> None:
        """Stop reading, else drop the filter, else leave the survey."""
        entry = self.query_one("#filter", Input)
        if self._reading:
            self.workers.cancel_group(self, "reading")
            self.notify("Stopped reading; reaches are read as you come to them.")
        elif entry.display:
            entry.value, entry.display = "", False
            self.query_one(ReachList).focus()
        else:
            self.leave()
            self.dismiss()

    def action_weak_first(self) -> None:
        """Sort by weak points, or back in stream order."""
        self._weak_first = not self._weak_first
        self.draw()

    @work(exclusive=True, group="dialog")
    async def action_condition(self) -> None:
        """Show another flow condition: the next of two, else one from a list."""
        names = self.lines.conditions
        if len(names) < 2:
            self.notify("There is no other flow condition; + adds one.")
            return
        at = names.index(self.condition) if self.condition in names else 0
        picked: int | None = (at + 1) % 2
        if len(names) > 2:
            picked = await self.app.push_screen_wait(Menu("Flow condition", names, at=at))
        if picked is not None:
            self.condition = names[picked]
            self.draw()

    @on(ReachList.Clicked)
    def action_walk(self) -> None:
        """Walk the part under the cursor."""
        self._adding.walk()

    def action_add(self) -> None:
        """Add a visit, a flow condition, a part or a reach."""
        self._adding.add()

    def action_review(self) -> None:
        """Open the review: every place, the weakest first."""
        from roughness.screens.review import ReviewScreen

        self.app.push_screen(ReviewScreen(self.pen))

    def action_adopt(self) -> None:
        """Adopt another n than the estimate, with the reason."""
        self._adding.adopt()

    def action_undo(self) -> None:
        """Take back the last thing this person wrote here, after saying what it is."""
        self._adding.undo()

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:  # noqa: ARG002
        """Offer to unite only where something lies apart."""
        return action != "unite" or bool(self._uniting.sentence())

    def action_unite(self) -> None:
        """Unite what was written apart, after saying what that does."""
        self._adding.unite(self._uniting)

    def action_export(self) -> None:
        """Write the table of n for a model."""
        self._adding.export()

    def action_evidence(self) -> None:
        """Open the photos and documents of the reach."""
        self._adding.evidence()

    def action_opinion(self) -> None:
        """Judge the part under the cursor blind, as a second person."""
        self._adding.opinion()

    def action_timeline(self) -> None:
        """Tell who said what about the reach, the latest first."""
        self._adding.timeline()

    def action_handbook(self) -> None:
        """Open the published tables."""
        from roughness.screens.handbook import HandbookScreen

        self.app.push_screen(HandbookScreen(self.survey.handbooks))

    def action_help(self) -> None:
        """Explain the screen."""
        self.app.push_screen(HelpScreen("Survey", SURVEY_HELP))
