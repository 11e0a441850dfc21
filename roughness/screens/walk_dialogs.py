"""What the walk asks in dialogs: gate, note, measures, carrying over, taking back."""

from collections.abc import Awaitable, Callable
from typing import TYPE_CHECKING, Any

from textual.screen import Screen

from roughness.desk.offers import n_so_far
from roughness.desk.places import Place
from roughness.desk.rows import rows_of_reach
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import enumerate_words, show_n
from roughness.quantities.ranges import point
from roughness.screens.form import Form
from roughness.screens.menu import Confirm, Menu
from roughness.screens.walk_gate import GateForm
from roughness.screens.walk_measured import has_measures, measured_dialog, sand_dialog
from roughness.screens.walk_stack import names_of
from roughness.screens.walk_values import note_dialog, values_dialog
from roughness.survey.choices import BaseChoice
from roughness.trail.lines import Line
from roughness.trail.telling import describe_line, withdrawable

if TYPE_CHECKING:
    from roughness.screens.walk import WalkScreen
    from roughness.screens.walk_course import Course


_MARK_FIRST = "Mark a grade first: ↑↓."


class WalkDialogs:
    """Runs the dialogs of a walk, one at a time; what is refused is said on the walk."""

    def __init__(self, screen: "WalkScreen") -> None:
        self._screen = screen

    @property
    def _course(self) -> "Course":
        return self._screen.course

    def _run(self, steps: Callable[[], Awaitable[None]]) -> None:
        self._screen.run_worker(self._said(steps), exclusive=True, group="dialog")

    async def _said(self, steps: Callable[[], Awaitable[None]]) -> None:
        try:
            await steps()
        except RoughnessError as error:
            self._screen.draw()
            self._screen.say(f"! {error}")

    async def _ask(self, dialog: Screen[Any]) -> Any:
        return await self._screen.app.push_screen_wait(dialog)

    # -- before the factors -------------------------------------------------------------------

    def first_gate(self) -> None:
        """Ask what is asked once; leaving it leaves the walk."""

        async def steps() -> None:
            if await self._ask(self._gate_form()):
                self._after_gate()
            else:
                self._screen.dismiss()

        self._run(steps)

    def gate(self) -> None:
        """Ask it again."""

        async def steps() -> None:
            if await self._ask(self._gate_form()):
                self._after_gate()

        self._run(steps)

    def _gate_form(self) -> GateForm:
        place = self._course.place
        visits = self._screen.survey.reach_state(place.reach.reach).visits
        pen = self._screen.pen
        return GateForm(place, visits, lambda gate: pen.set_gate(place.reach.reach, gate))

    def _after_gate(self) -> None:
        self._course.reload()
        self._course.start()
        self._screen.draw()

    # -- one factor ---------------------------------------------------------------------------

    def note_due(self, why: str) -> None:
        """Ask for the note without which the value does not stand, then take it."""
        self._take_with_note("Why outside the published range?", self._note_now(), why)

    def note(self) -> None:
        """Write a note on what stands, or take the highlighted grade with one."""
        course = self._course
        if course.question is None:
            self._note_of_driver()
        elif not course.is_marked:
            self._screen.say(_MARK_FIRST)
        elif course.standing is None or course.is_draft or not course.is_standing:
            name = course.offer.grade.name
            self._take_with_note(f"Take {name} with a note", self._note_now())
        else:
            title = f"Note: {self._named()}, {course.offer.grade.name}"
            self._write(note_dialog(title, self._note_now(), course.write_note))

    def _note_now(self) -> str | None:
        standing = self._course.standing
        return standing.choice.note if standing and self._course.is_standing else None

    def _take_with_note(self, title: str, now: str | None, why: str = "") -> None:
        course = self._course
        question = course.question

        async def steps() -> None:
            if await self._ask(note_dialog(title, now, course.take, why)):
                self._screen.go_on_after(question, True)

        self._run(steps)

    def _write(self, form: Form[bool]) -> None:
        async def steps() -> None:
            if await self._ask(form):
                self._screen.draw()

        self._run(steps)

    def _note_of_driver(self) -> None:
        course = self._course
        estimate = course.place.estimate()
        if estimate is None:
            self._screen.say("A factor is still open.")
            return
        driver = estimate.driver
        wanted = driver.segment, driver.factor
        # Where bed and banks are told apart, variation and bends are asked for the whole part.
        question = wanted if wanted in course.place.questions else (None, driver.factor)
        segments = [segment.name for segment in course.place.segments]
        title = f"Why {names_of(question, segments)} is {driver.grade or 'as it is'}"
        form = note_dialog(title, driver.note, lambda note: course.note_on(question, note))
        self._write(form)

    def _named(self) -> str:
        course = self._course
        assert course.question is not None
        return names_of(course.question, [segment.name for segment in course.place.segments])

    def values(self) -> None:
        """Type low, best and high of the highlighted grade."""
        course = self._course
        if not course.is_marked:
            self._screen.say(_MARK_FIRST)
            return
        assert course.question is not None
        factor, grade = course.question[1], course.offer.grade.name
        self._write(values_dialog(factor, grade, course.range_at_hand(), course.set_range))

    def measured(self) -> None:
        """Type what was measured; the table then shows what it suggests."""
        course = self._course
        assert course.question is not None
        factor = course.question[1]
        if not has_measures(factor):
            self._screen.say(f"Nothing measured decides {factor}: take the grade that fits.")
            return
        known = course.criteria_at_hand()
        self._write(measured_dialog(course.place, factor, known, course.set_typed))

    def both(self) -> None:
        """Take both grades of a measure near their edge, with the note that says so."""
        course = self._course
        if course.union is None:
            self._screen.say("Nothing measured lies near the edge of two grades here.")
            return
        note = course.take_union()
        self._screen.draw_table()
        self._take_with_note("Take both grades as one range", note, "The note says why.")

    def sand(self) -> None:
        """Ask for regime and size of sand, or a value of one's own, then take it."""
        course = self._course
        question, row = course.question, course.cursor
        known = course.criteria_at_hand()
        assert isinstance(known, BaseChoice)

        def keep(choice: BaseChoice, own: float | None, note: str) -> None:
            course.set_typed(choice)
            course.move_to(row)
            if own is not None:
                course.set_range(point(own))
            course.take(note.strip() or None)

        async def steps() -> None:
            if await self._ask(sand_dialog(course.place, known, keep)):
                self._screen.go_on_after(question, True)
            else:
                course.go_to(question)
                self._screen.draw()

        self._run(steps)

    # -- carrying over ------------------------------------------------------------------------

    def carry(self) -> None:
        """Carry the factor at hand over, from the one source there is or the one picked."""
        course = self._course
        question = course.question
        assert question is not None

        async def steps() -> None:
            found = [one for one in course.sources() if one.at(*question) is not None]
            source = await self._source(f"Carry {self._named()} over from", found)
            if source is not None:
                course.carry(source)
                self._screen.draw()

        self._run(steps)

    def carry_part(self) -> None:
        """Carry the whole part over, after saying from where."""
        course = self._course

        async def steps() -> None:
            title = f"Carry all of {printable(course.part)} over from"
            source = await self._source(title, course.sources(), always=True)
            if source is not None:
                count = course.carry_part(source)
                self._screen.draw()
                self._screen.say(f"Carried over: {count} lines; ⏎ confirms each where it holds.")

        self._run(steps)

    async def _source(
        self, title: str, found: list[Place], *, always: bool = False
    ) -> Place | None:
        if not found:
            self._screen.say("There is nothing to carry over: no like part has this yet.")
            return None
        if len(found) == 1 and not always:
            return found[0]
        says = "Each choice stays marked until ⏎ confirms it; what was chosen here is replaced."
        picked = await self._ask(Menu(title, [_told(one) for one in found], says=says))
        return None if picked is None else found[picked]

    # -- the whole part -----------------------------------------------------------------------

    def undo(self) -> None:
        """Say what would be taken back; Enter takes it back."""
        self._run(self._undo)

    async def _undo(self) -> None:
        course, pen = self._course, self._screen.pen
        line = withdrawable(self._screen.survey.reach_state(course.reach), pen.by)
        if line is None:
            self._screen.say("There is nothing of yours to take back in this reach.")
            return
        told = f"{describe_line(line)}.\nThe record keeps both the line and its withdrawal."
        if not await self._ask(Confirm("Take this back?", told)):
            return
        pen.withdraw(course.reach, line)
        course.reload()
        questions = course.place.questions
        about = self._question_of(line)
        if about in questions:
            course.go_to(about)
        else:
            course.go_to_open()
        self._screen.draw()
        self._screen.say(f"Taken back: {describe_line(line)}.")

    def _question_of(self, line: Line) -> Any:
        """Return the question here that a line answered; None where it was another place."""
        place, data = self._course.place, line.data
        here = (place.part.part, place.condition.condition)
        there = (str(data.get("part", "")), str(data.get("condition", "")))
        if [same_name_key(one) for one in here] != [same_name_key(one) for one in there]:
            return None
        return data.get("segment"), data.get("factor")

    def condition(self) -> None:
        """Walk this part under another flow condition."""

        async def steps() -> None:
            names = [one.condition for one in self._screen.survey.state.conditions]
            now = same_name_key(self._course.condition)
            others = [name for name in names if same_name_key(name) != now]
            if not others:
                self._screen.say("There is no other flow condition; + in the survey adds one.")
                return
            picked = 0 if len(others) == 1 else await self._ask(Menu("Flow condition", others))
            if picked is not None:
                self._screen.walk_on(self._course.part, others[picked])

        self._run(steps)

    def adopt(self) -> None:
        """Ask for the n that goes to the model, and why."""
        from roughness.screens.survey_forms import adopt_form
        from roughness.screens.survey_lines import SurveyLine

        async def steps() -> None:
            place = self._course.place
            found = rows_of_reach(self._screen.survey, place.reach.reach)
            row = next(r for r in found if r.place and r.place.state is place.state)
            if await self._ask(adopt_form(self._screen.pen, SurveyLine(row=row))):
                self._course.reload()
                self._screen.draw()

        self._run(steps)

    def why(self) -> None:
        """Explain the factor at hand."""
        from roughness.screens.help import HelpScreen
        from roughness.screens.walk_why import why_text

        self._screen.app.push_screen(HelpScreen("Walk", why_text(self._course)))

    def handbook(self) -> None:
        """Open the published tables."""
        from roughness.screens.handbook import HandbookScreen

        place, question = self._course.place, self._course.question
        self._screen.app.push_screen(
            HandbookScreen(
                self._screen.survey.handbooks,
                place.handbook.key,
                place.part.setting,
                question[1] if question else None,
            )
        )

    def evidence(self) -> None:
        """Open the evidence of the reach; what is attached supports the factor at hand."""
        from roughness.screens.evidence import EvidenceScreen
        from roughness.screens.evidence_forms import About

        place, question = self._course.place, self._course.question
        about = About(
            reach=place.reach.reach,
            part=place.part.part,
            condition=place.condition.condition,
            factor=question[1] if question else None,
        )
        screen = self._screen
        evidence = EvidenceScreen(screen.pen, about, screen.drop)
        screen.app.push_screen(evidence, lambda _: screen.draw())

    def timeline(self) -> None:
        """Open the trail of the reach in sentences."""
        from roughness.screens.timeline import TimelineScreen

        self._screen.app.push_screen(TimelineScreen(self._screen.survey, self._course.reach))


def _told(source: Place) -> str:
    """Say what a source holds, so that it can be picked."""
    grades = [
        standing.choice.grade or "measured"
        for question in source.questions
        if (standing := source.at(*question)) is not None
    ]
    n = n_so_far(source)
    told = f"n {show_n(n.best)}, " if n else ""
    return f"{source.reach.reach}, {source.part.part}: {told}{enumerate_words(grades)}"
