"""What the page of a review asks in dialogs: questions, answers, verdicts, taking back."""

import asyncio
from collections.abc import Awaitable, Callable, Mapping
from typing import TYPE_CHECKING, Any

from textual.screen import Screen

from roughness.custody.status import CHANGED, RETURNED
from roughness.desk.history import accepted_in_words, since_acceptance
from roughness.desk.identity import signing_key
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row
from roughness.errors import InputError, RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.reasoning.factor_sentence import capital
from roughness.screens.form import Field, Form
from roughness.screens.help import HelpScreen
from roughness.screens.menu import Confirm
from roughness.screens.review_accept import (
    accept_all_clean,
    named,
    overruling_form,
    what_is_accepted,
)
from roughness.screens.review_ledger import named as factor_named
from roughness.screens.review_opinions import Opinions
from roughness.screens.review_words import verdict
from roughness.trail.telling import describe_line, withdrawable

if TYPE_CHECKING:
    from roughness.screens.review_page import ReviewPage


class ReviewDialogs:
    """Runs the dialogs of a page, one at a time; what is refused is said on the page."""

    def __init__(self, screen: "ReviewPage") -> None:
        self._screen = screen
        self._reviewer = Reviewer(screen.pen)
        self.opinions = Opinions(screen, screen.pen, lambda: screen.row, self._again)

    @property
    def _row(self) -> Row:
        return self._screen.row

    @property
    def place_in_words(self) -> str:
        """Reach, part and flow condition."""
        return named(self._row)

    def _run(self, steps: Callable[[], Awaitable[str | None]]) -> None:
        self._screen.run_worker(self._said(steps), exclusive=True, group="dialog")

    async def _said(self, steps: Callable[[], Awaitable[str | None]]) -> None:
        try:
            told = await steps()
        except RoughnessError as error:
            told = f"! {error}"
        self._again()
        if told:
            self._screen.say(told)

    async def _ask(self, dialog: Screen[Any]) -> Any:
        return await self._screen.app.push_screen_wait(dialog)

    def _again(self) -> None:
        self._screen.places.look()
        self._screen.draw()

    async def _one_line(
        self, title: str, label: str, says: str, keep: Callable[[str], object], hint: str = ""
    ) -> bool:
        """Ask for one text; returns whether it was kept."""

        def take(typed: Mapping[str, str]) -> bool:
            keep(typed["text"])
            return True

        form = Form(title, [Field(key="text", label=label, hint=hint)], take, says=says)
        return bool(await self._ask(form))

    # -- questions and answers ----------------------------------------------------------------

    def inquire(self) -> None:
        """Ask about the factor under the cursor, the whole, or go on from a question."""

        async def steps() -> str | None:
            row, line, about = self._row, self._screen.line, self._screen.factor
            place = row.place
            assert place is not None
            segment, factor = about or (None, None)
            follows = line.asked.line.hash if line.asked else None
            what = factor_named((segment, factor)) if factor else "the whole part"
            title = f"Inquire about {what}"
            says = f"{named(row)}."
            if line.asked is not None:
                says += f" Goes on from: {printable(line.asked.question.text)}"
            asked = await self._one_line(
                title,
                "Question",
                says,
                lambda text: self._reviewer.ask(
                    place, text, factor=factor, segment=segment, follows=follows
                ),
            )
            return f"Asked about {what}." if asked else None

        self._run(steps)

    def answer(self) -> None:
        """Answer the question or the finding under the cursor."""

        async def steps() -> str | None:
            row, line = self._row, self._screen.line
            place = row.place
            assert place is not None
            if line.asked is not None:
                asked, reach = line.asked, row.reach.reach
                by, text = printable(asked.line.by), printable(asked.question.text)
                kept = await self._one_line(
                    "Answer the question",
                    "Answer",
                    f"{by} asks: {text}",
                    lambda text: self._reviewer.answer(reach, asked.line.hash, text),
                )
            elif line.finding is not None:
                finding = line.finding
                kept = await self._one_line(
                    "Answer the finding",
                    "Answer",
                    printable(finding.says),
                    lambda text: self._reviewer.answer_finding(place, finding, text),
                )
            else:
                return None
            return "Answered." if kept else None

        self._run(steps)

    # -- verdicts -----------------------------------------------------------------------------

    def accept(self) -> None:
        """Say what is accepted and what speaks against it; Enter or a reason does it."""
        self._run(self._accept)

    async def _accept(self) -> str | None:
        self._screen.places.look()
        row = self._row
        if row.estimate is None:
            raise InputError(f"{named(row)} has no n yet", wanted="choose the open factors first")
        refusals = self._reviewer.refusals(row)
        final = [refusal for refusal in refusals if not refusal.may_be_overruled]
        if final:
            told = ". ".join(capital(printable(refusal.says)) for refusal in final)
            return f"! Not accepted. {told}."
        says = what_is_accepted(row, self._reviewer.case(row).unanswered)
        if row.status in (RETURNED, CHANGED):
            says += f" {verdict(self._screen.survey, row)}"
        if refusals:
            done = await self._ask(overruling_form(self._reviewer, row, refusals, says))
        else:
            done = await self._ask(Confirm("Accept this value?", says))
            if done:
                await asyncio.to_thread(self._reviewer.accept, row, key=signing_key())
        return f"Accepted: {named(row)}. → goes on to the next." if done else None

    def return_(self) -> None:
        """Ask why, then give it back."""

        async def steps() -> str | None:
            row = self._row
            place = row.place
            assert place is not None
            done = await self._one_line(
                "Return this value to the crew",
                "Why",
                f"{named(row)}.",
                lambda text: self._reviewer.return_(place, text),
                "what is to be done before it comes back",
            )
            return f"Returned: {named(row)}." if done else None

        self._run(steps)

    def accept_all(self) -> None:
        """Accept in one step what has nothing open, after a list of it."""

        async def steps() -> str | None:
            screen = self._screen
            return await accept_all_clean(screen.app, screen.pen, screen.places)

        self._run(steps)

    def undo(self) -> None:
        """Say what would be taken back; Enter takes it back."""

        async def steps() -> str | None:
            screen, reach = self._screen, self._row.reach.reach
            line = withdrawable(screen.survey.reach_state(reach), screen.pen.by)
            if line is None:
                return "There is nothing of yours to take back in this reach."
            told = f"{capital(describe_line(line))}.\nThe record keeps both it and its withdrawal."
            if not await self._ask(Confirm("Take this back?", told)):
                return None
            screen.pen.withdraw(reach, line)
            return f"Taken back: {describe_line(line)}."

        self._run(steps)

    # -- what to read -------------------------------------------------------------------------

    def since(self) -> None:
        """Tell line by line what was said since the last acceptance."""

        async def steps() -> str | None:
            row, survey = self._row, self._screen.survey
            place = row.place
            assert place is not None
            accepted = accepted_in_words(survey, place)
            if accepted is None:
                returned = row.review.standing_return is not None
                return "It was returned." if returned else "Nobody accepted it yet."
            changes = since_acceptance(survey, place)
            told = [f"{capital(accepted)}.", ""]
            weighs = [str(change) for change in changes if change.weighs]
            known = [str(change) for change in changes if not change.weighs]
            told += ["WHAT TOUCHES WHAT WAS ACCEPTED", *(weighs or ["Nothing."]), ""]
            told += ["GOOD TO KNOW", *(known or ["Nothing."])]
            title = f"{named(row)}: since it was accepted"
            await self._ask(HelpScreen(title, "\n".join(told)))
            return None

        self._run(steps)
