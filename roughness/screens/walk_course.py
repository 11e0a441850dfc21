"""Where somebody is on the walk, and what each key would do there; no terminal here.

What is kept lies in the trail. A course holds only what is not: the question at hand, the
highlighted row, a measure that was typed and a value that was moved.
"""

from dataclasses import dataclass, replace
from typing import Final

from roughness.assessment.resolving import noted
from roughness.desk import carrying
from roughness.desk.folder import SurveyFolder
from roughness.desk.offers import (
    Offer,
    Offers,
    bare,
    n_so_far,
    n_with,
    offers,
    resolved_at,
    water_change_cm,
)
from roughness.desk.places import Place, Question, Standing, place_of
from roughness.desk.recording import Recorder
from roughness.errors import InputError
from roughness.quantities.printing import enumerate_words, show_value
from roughness.quantities.ranges import Range
from roughness.survey.choices import CHOICES, BaseChoice, Choice
from roughness.survey.words import MULTIPLIER

# One press of an arrow: the last digit that n is printed with.
STEP: Final = 0.001
STEP_OF_MULTIPLIER: Final = 0.01
_DECIMALS: Final = 6


class NoteDueError(InputError):
    """A value outside the published range stands only with a note."""


class SandDueError(InputError):
    """Sand was picked, and its size or flow regime is not known yet."""


@dataclass(frozen=True, kw_only=True)
class GradeRow:
    """One row of the table of grades as it is shown."""

    offer: Offer
    range: Range | None
    """With the moved value, where this row is highlighted."""
    n: Range | None
    water_cm: float | None
    standing: bool
    """Whether this grade was taken."""


class Course:
    """The walk through one part under one flow condition.

    Parameters
    ----------
    survey : SurveyFolder
        The survey.
    pen : Recorder
        Who writes.
    reach, part, condition : str
        Where.
    """

    def __init__(
        self, survey: SurveyFolder, pen: Recorder, reach: str, part: str, condition: str
    ) -> None:
        self.survey, self.pen = survey, pen
        self.reach, self.part, self.condition = reach, part, condition
        self.place: Place
        self.question: Question | None = None
        self.offers: Offers | None = None
        self.cursor = 0
        self.typed: Choice | None = None
        self.moved: Range | None = None
        self.reload()
        self.start()

    # -- where ------------------------------------------------------------------------------

    def reload(self) -> None:
        """Read the place again, after something was written."""
        self.place = place_of(self.survey, self.reach, self.part, self.condition)

    def go_to(self, question: Question | None) -> None:
        """Put a question at hand, the cursor on what stands; None is the summary."""
        self.question, self.typed, self.moved = question, None, None
        self._look()
        self.cursor = self._row_to_start_on()

    def start(self) -> None:
        """Go to the first open question of all."""
        self.go_to(self._first_open())

    def go_to_open(self) -> None:
        """Go to the next open question, or to the summary where there is none."""
        self.go_to(self._next_open())

    def back(self) -> bool:
        """Go one factor back; False at the first."""
        questions = self.place.questions
        at = len(questions) if self.question is None else questions.index(self.question)
        if at == 0:
            return False
        self.go_to(questions[at - 1])
        return True

    @property
    def needs_gate(self) -> bool:
        """Whether nobody was asked yet what is asked before the factors."""
        state = self.place.state
        return bool(self.place.missing) and (state is None or state.gate is None)

    @property
    def number(self) -> int:
        """Place of the question at hand, 1 for the first."""
        assert self.question is not None
        return self.place.questions.index(self.question) + 1

    @property
    def standing(self) -> Standing | None:
        """What stands for the question at hand."""
        return self.place.at(*self.question) if self.question else None

    def _todo(self) -> list[Question]:
        """Return the questions nobody answered here, then those only carried over."""
        found = list(self.place.missing)
        for question in self.place.questions:
            standing = self.place.at(*question)
            if standing and standing.carried_from and not standing.inherited_from:
                found.append(question)
        return found

    def _first_open(self) -> Question | None:
        return next(iter(self._todo()), None)

    def _next_open(self) -> Question | None:
        todo, questions = self._todo(), self.place.questions
        if self.question in questions:
            after = questions[questions.index(self.question) + 1 :]
            ahead = [question for question in after if question in todo]
            todo = ahead or todo
        return next(iter(todo), None)

    # -- the rows ---------------------------------------------------------------------------

    def _look(self) -> None:
        if self.question is None:
            self.offers = None
        else:
            self.offers = offers(self.place, self.question, self.typed)

    def _row_to_start_on(self) -> int:
        if self.offers is None or self.question is None:
            return 0
        resolved = resolved_at(self.place, self.question)
        taken = resolved.grade_key if resolved else None
        keys = [offer.grade.key for offer in self.offers.grades]
        wanted = [taken] if taken else list(self.offers.measured.grades)
        return next((keys.index(key) for key in wanted if key in keys), 0)

    def rows(self) -> list[GradeRow]:
        """Return the table of grades as it is to be shown."""
        if self.offers is None or self.question is None:
            return []
        resolved = resolved_at(self.place, self.question)
        taken = resolved.grade_key if resolved else None
        found = [
            GradeRow(
                offer=offer,
                range=offer.range,
                n=offer.n,
                water_cm=offer.water_cm,
                standing=offer.grade.key == taken,
            )
            for offer in self.offers.grades
        ]
        found[self.cursor] = self._highlighted(found[self.cursor])
        return found

    def _highlighted(self, row: GradeRow) -> GradeRow:
        assert self.question is not None
        range_ = self.range_at_hand()
        if range_ is None or range_ == row.range:
            return row
        n = n_with(self.place, self.question, range_)
        water = water_change_cm(self.place, n_so_far(self.place), n)
        return replace(row, range=range_, n=n, water_cm=water)

    @property
    def offer(self) -> Offer:
        """The highlighted grade."""
        assert self.offers is not None
        return self.offers.grades[self.cursor]

    @property
    def is_standing(self) -> bool:
        """Whether the highlighted grade is the one that was taken."""
        resolved = resolved_at(self.place, self.question) if self.question else None
        return resolved is not None and resolved.grade_key == self.offer.grade.key

    def range_at_hand(self) -> Range | None:
        """Return the range of the highlighted row: moved, standing or published."""
        if self.moved is not None:
            return self.moved
        resolved = resolved_at(self.place, self.question) if self.question else None
        if resolved is not None and self.is_standing and self.typed is None:
            return resolved.range
        return self.offer.range

    def move_to(self, row: int) -> None:
        """Highlight another row; a value that was moved stays behind."""
        assert self.offers is not None
        self.cursor = max(0, min(len(self.offers.grades) - 1, row))
        self.moved = None

    # -- value and range ----------------------------------------------------------------------

    @property
    def step(self) -> float:
        """How far one key moves a value of the factor at hand."""
        assert self.question is not None
        return STEP_OF_MULTIPLIER if self.question[1] == MULTIPLIER else STEP

    def nudge(self, steps: int) -> bool:
        """Move the best value within its range; False at its end or where there is none."""
        now = self.range_at_hand()
        if now is None:
            return False
        best = min(now.high, max(now.low, _clean(now.best + steps * self.step)))
        if best == now.best:
            return False
        self.moved = Range(now.low, best, now.high)
        return True

    def widen(self, steps: int) -> bool:
        """Move both limits apart (or, below 0, together); False where nothing moved."""
        now = self.range_at_hand()
        if now is None:
            return False
        by, floor = (
            steps * self.step,
            1.0 if self.question and self.question[1] == MULTIPLIER else 0,
        )
        low = min(now.best, max(min(floor, now.low), _clean(now.low - by)))
        high = max(now.best, _clean(now.high + by))
        if (low, high) == (now.low, now.high):
            return False
        self.moved = Range(low, now.best, high)
        return True

    def set_range(self, range_: Range) -> None:
        """Take low, best and high as they were typed; not kept yet."""
        self.moved = range_

    def set_typed(self, choice: Choice) -> None:
        """Take measured criteria as they were typed; they suggest a grade, and are not kept yet.

        Raises
        ------
        InputError
            Where a number cannot be.
        """
        assert self.question is not None
        self.offers = offers(self.place, self.question, choice)
        self.typed, self.moved = bare(choice), None
        grades = self.offers.measured.grades or self.offers.measured.near
        keys = [offer.grade.key for offer in self.offers.grades]
        if grades and not (self.is_standing and self.offer.grade.key in grades):
            self.cursor = keys.index(grades[0])

    @property
    def union(self) -> Range | None:
        """Both grades together, where the measured value lies near their common edge."""
        near = self.offers.measured.near if self.offers else ()
        ranges = (
            [o.range for o in self.offers.grades if o.grade.key in near and o.range]
            if (self.offers)
            else []
        )
        if len(ranges) < 2:
            return None
        low, high = min(r.low for r in ranges), max(r.high for r in ranges)
        return Range(low, _clean((low + high) / 2), high)

    def take_union(self) -> str:
        """Put the range of both grades at hand and return the note that says why."""
        assert self.union is not None and self.offers is not None
        names = [
            o.grade.name for o in self.offers.grades if o.grade.key in self.offers.measured.near
        ]
        self.moved = self.union
        return f"{self.offers.measured.says}: near the edge between {enumerate_words(names)}"

    # -- what would be kept -------------------------------------------------------------------

    def criteria_at_hand(self) -> Choice:
        """Return what is measured for the factor at hand: typed just now, else what stands."""
        assert self.question is not None
        if self.typed is not None:
            return self.typed
        return bare(self.standing.choice) if self.standing else CHOICES[self.question[1]]()

    @property
    def is_draft(self) -> bool:
        """Whether something typed or moved is not kept yet."""
        return self.typed is not None or self.moved is not None

    def choice(self) -> Choice:
        """Return the choice that taking the highlighted row would keep."""
        standing = self.standing
        if standing and self.is_standing and not self.is_draft:
            return standing.choice
        choice = self.criteria_at_hand()
        if standing and self.is_standing:
            choice = replace(choice, note=standing.choice.note)
            if self.moved is None:
                same = standing.choice
                choice = replace(choice, low=same.low, best=same.best, high=same.high)
        if self._decided_by_measure() != self.offer.grade.key:
            choice = replace(choice, grade=self.offer.grade.key)
        return self._with_moved(choice)

    def _decided_by_measure(self) -> str | None:
        assert self.offers is not None
        grades = self.offers.measured.grades
        return grades[0] if len(grades) == 1 else None

    def _with_moved(self, choice: Choice) -> Choice:
        moved, offered = self.moved, self.offer.range
        if moved is None:
            return choice
        if offered is None:
            return replace(choice, low=moved.low, best=moved.best, high=moved.high)
        return replace(
            choice,
            low=moved.low if moved.low != offered.low else None,
            best=moved.best if moved.best != offered.best else None,
            high=moved.high if moved.high != offered.high else None,
        )

    @property
    def outside(self) -> bool:
        """Whether the range at hand leaves what is published for the grade."""
        now, published = self.range_at_hand(), self.offer.range
        if now is None or published is None:
            return False
        return now.low < published.low or now.high > published.high

    # -- keeping --------------------------------------------------------------------------------

    def take(self, note: str | None = None) -> bool:
        """Keep the highlighted row; True where a line was written.

        Raises
        ------
        NoteDueError, SandDueError
            Where something has to be said first; nothing was written.
        RoughnessError
            Where it does not fit or was not kept.
        """
        assert self.question is not None
        choice = self.choice() if note is None else replace(self.choice(), note=note or None)
        self._refuse_unsaid(choice)
        standing = self.standing
        segment, factor = self.question
        if standing is None or choice != standing.choice:
            self.pen.choose(self.place, factor, choice, segment=segment)
        elif standing.carried_from and not standing.inherited_from:
            carrying.confirm(self.pen, self.place, self.question)
        else:
            return False
        self._kept()
        return True

    def _refuse_unsaid(self, choice: Choice) -> None:
        grade = self.offer.grade
        if grade.by_d50_mm and isinstance(choice, BaseChoice):
            regime_due = choice.regime is None and self.place.part.setting == "channel"
            if regime_due or (choice.d50_mm is None and choice.best is None):
                raise SandDueError("sand needs its median size and flow regime")
        if self.outside and not noted(choice):
            published = self.offer.range
            assert published is not None
            span = f"{show_value(published.low)} to {show_value(published.high)}"
            raise NoteDueError(
                f"the range leaves what is published for {grade.name} ({span})",
                wanted="say why in a note",
            )

    def write_note(self, note: str) -> None:
        """Keep a note on what stands for the question at hand, which stays at hand.

        Raises
        ------
        InputError
            Where nothing was taken yet.
        """
        self.note_on(self.question, note)

    def note_on(self, question: Question | None, note: str) -> None:
        """Keep a note on what stands for any question."""
        standing = self.place.at(*question) if question else None
        if standing is None or question is None:
            raise InputError("nothing was taken here yet", wanted="take a grade, then note why")
        choice = replace(standing.choice, note=note.strip() or None)
        if choice != standing.choice:
            segment, factor = question
            self.pen.choose(self.place, factor, choice, segment=segment)
            self._kept()

    def _kept(self) -> None:
        self.reload()
        self.typed, self.moved = None, None
        self._look()

    def carry(self, source: Place) -> None:
        """Carry the factor at hand over; it stays marked until it is confirmed."""
        assert self.question is not None
        carrying.carry(self.pen, self.place, self.question, source)
        self.reload()
        self.go_to(self.question)

    def carry_part(self, source: Place) -> int:
        """Carry the whole part over and go to the first factor to confirm; return how many."""
        try:
            lines = carrying.carry_part(self.pen, self.place, source)
        finally:
            self.reload()
        self.start()
        return len(lines)

    def sources(self) -> list[Place]:
        """Return where choices may be carried from."""
        return carrying.sources(self.survey, self.place)


def _clean(value: float) -> float:
    """Take the noise of binary fractions out of a value that keys moved."""
    return round(value, _DECIMALS)
