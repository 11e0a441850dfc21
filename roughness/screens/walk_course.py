"""Where somebody is on the walk, and what each key would do there; no terminal here.

What is kept lies in the trail. A course holds only what is not: the question at hand, the
highlighted row, a measure that was typed and a value that was moved.
"""

from dataclasses import replace

from roughness.desk import carrying
from roughness.desk.conflicting import conflict_at, sides_in_words
from roughness.desk.evidence_lists import is_about
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, Question, place_of
from roughness.desk.recording import Recorder
from roughness.errors import InputError
from roughness.screens.walk_at_hand import AtHand
from roughness.trail.conflicts import Conflict


class Course(AtHand):
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
        super().__init__(place_of(survey, reach, part, condition))
        self.survey, self.pen = survey, pen
        self.reach, self.part, self.condition = reach, part, condition
        self.start()

    # -- where ------------------------------------------------------------------------------

    def reload(self) -> None:
        """Read the place again, after something was written."""
        self.place = place_of(self.survey, self.reach, self.part, self.condition)

    def go_to(self, question: Question | None) -> None:
        """Put a question at hand, the cursor on what stands; None is the summary."""
        self.put_at_hand(question)

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
    def evidence_count(self) -> int:
        """How many photos and documents are about the factor at hand."""
        factor = self.question[1] if self.question else None
        filed = self.survey.reach_state(self.reach).evidence
        return sum(is_about(one.evidence, self.part, self.condition, factor) for one in filed)

    @property
    def said_apart(self) -> str:
        """What people said of the factor at hand without seeing each other; empty if nothing."""
        conflict = self._conflict(self.question) if self.question else None
        if conflict is None:
            return ""
        return f"Said apart: {sides_in_words(conflict)}. Choose again: that settles it."

    def _conflict(self, question: Question) -> Conflict | None:
        return conflict_at(self.place, question, self.survey.conflicts(self.reach))

    def _todo(self) -> list[Question]:
        """Return the questions nobody answered here, those said apart, those only carried."""
        found = list(self.place.missing)
        found += [q for q in self.place.questions if q not in found and self._conflict(q)]
        for question in self.place.questions:
            standing = self.place.at(*question)
            if standing and standing.carried_from and not standing.inherited_from:
                found += [question] if question not in found else []
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
        self.refuse_unsaid(choice)
        standing = self.standing
        segment, factor = self.question
        if standing is None or choice != standing.choice or self._conflict(self.question):
            self.pen.choose(self.place, factor, choice, segment=segment)
        elif standing.carried_from and not standing.inherited_from:
            carrying.confirm(self.pen, self.place, self.question)
        else:
            return False
        self._kept()
        return True

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
        self.look()

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
