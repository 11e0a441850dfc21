"""The question at hand: its grades, the marked row, what was typed or moved and not kept yet."""

from dataclasses import dataclass, replace
from typing import Final

from roughness.assessment.resolving import noted
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
from roughness.desk.places import Place, Question, Standing
from roughness.errors import InputError
from roughness.quantities.printing import enumerate_words, show_value
from roughness.quantities.ranges import Range
from roughness.survey.choices import CHOICES, BaseChoice, Choice
from roughness.survey.words import MULTIPLIER

# One press of an arrow: the last digit that n is printed with.
STEP: Final = 0.001
STEP_OF_MULTIPLIER: Final = 0.01
_DECIMALS: Final = 6


NOTHING_MARKED: Final = -1


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


class AtHand:
    """One question of a place, while somebody thinks about it.

    Parameters
    ----------
    place : Place
        Where it is asked.
    """

    def __init__(self, place: Place) -> None:
        self.place = place
        self.question: Question | None = None
        self.offers: Offers | None = None
        self.cursor = NOTHING_MARKED
        self.typed: Choice | None = None
        self.moved: Range | None = None

    def put_at_hand(self, question: Question | None) -> None:
        """Put a question at hand, the mark on what stands or is suggested; None: no question."""
        self.question, self.typed, self.moved = question, None, None
        self.look()
        self.cursor = self._row_to_start_on()

    @property
    def standing(self) -> Standing | None:
        """What stands for the question at hand."""
        return self.place.at(*self.question) if self.question else None

    # -- the rows ---------------------------------------------------------------------------

    def look(self) -> None:
        """Work out what each grade would do, from what stands and what was typed."""
        if self.question is None:
            self.offers = None
        else:
            self.offers = offers(self.place, self.question, self.typed)

    def _row_to_start_on(self) -> int:
        if self.offers is None or self.question is None:
            return NOTHING_MARKED
        resolved = resolved_at(self.place, self.question)
        taken = resolved.grade_key if resolved else None
        keys = [offer.grade.key for offer in self.offers.grades]
        wanted = [taken] if taken else list(self.offers.measured.grades)
        return next((keys.index(key) for key in wanted if key in keys), NOTHING_MARKED)

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
        if self.is_marked:
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
    def is_marked(self) -> bool:
        """Whether a row is marked: on an open question none is, so that none is taken unseen."""
        return self.offers is not None and self.cursor != NOTHING_MARKED

    @property
    def offer(self) -> Offer:
        """The marked grade; only where one :attr:`is_marked`."""
        assert self.offers is not None
        return self.offers.grades[self.cursor]

    @property
    def is_standing(self) -> bool:
        """Whether the highlighted grade is the one that was taken."""
        if not self.is_marked:
            return False
        resolved = resolved_at(self.place, self.question) if self.question else None
        return resolved is not None and resolved.grade_key == self.offer.grade.key

    def range_at_hand(self) -> Range | None:
        """Return the range of the highlighted row: moved, standing or published."""
        if not self.is_marked:
            return None
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
        by = steps * self.step
        floor = 1.0 if self.step == STEP_OF_MULTIPLIER else 0.0
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
        if grades and not (self.is_marked and self.offer.grade.key in grades):
            self.cursor = keys.index(grades[0])

    @property
    def union(self) -> Range | None:
        """Both grades together, where the measured value lies near their common edge."""
        if self.offers is None:
            return None
        near = self.offers.measured.near
        ranges = [o.range for o in self.offers.grades if o.grade.key in near and o.range]
        if len(ranges) < 2:
            return None
        low, high = min(r.low for r in ranges), max(r.high for r in ranges)
        return Range(low, _clean((low + high) / 2), high)

    def take_union(self) -> str:
        """Put the range of both grades at hand and return the note that says why."""
        assert self.union is not None and self.offers is not None
        measured, grades = self.offers.measured, self.offers.grades
        near = [at for at, one in enumerate(grades) if one.grade.key in measured.near]
        if self.cursor not in near:
            self.cursor = near[0]
        self.moved = self.union
        names = enumerate_words([grades[at].grade.name for at in near])
        return f"{measured.says}: near the edge between {names}"

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
        """Return the choice that taking the highlighted row would keep.

        Raises
        ------
        InputError
            Where no row is marked.
        """
        if not self.is_marked:
            raise InputError("no grade is marked yet", wanted="press its number, or ↑↓ and ⏎")
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
        now = self.range_at_hand()
        published = self.offer.range if self.is_marked else None
        if now is None or published is None:
            return False
        return now.low < published.low or now.high > published.high

    def refuse_unsaid(self, choice: Choice) -> None:
        """Refuse what has to be said first.

        Raises
        ------
        NoteDueError
            A note, where the range leaves what is published.
        SandDueError
            Size and regime, where sand was picked.
        """
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


def _clean(value: float) -> float:
    """Take the noise of binary fractions out of a value that keys moved."""
    return round(value, _DECIMALS)
