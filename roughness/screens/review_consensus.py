"""What people agreed on after a second opinion: whose choice stands for each factor, and why."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

from roughness.desk.opinions import agree
from roughness.desk.places import Place, Question
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, show_value
from roughness.screens.form import Field, Form
from roughness.screens.review_accept import named as place_named
from roughness.screens.walk_stack import names_of
from roughness.survey.choices import Choice, Factors, Judgement, Segment
from roughness.survey.words import Factor, factors_of

_FIRST = "first"


def consensus_form(pen: Recorder, row: Row) -> Form[bool] | None:
    """Ask whose choice stands for each factor; None where there is no second opinion.

    Where people told bed and banks apart in different ways, one estimate is taken whole.
    """
    place = row.place
    assert place is not None
    told = {printable(one.line.by): one.opinion.estimate for one in row.review.opinion_of_each}
    if not told:
        return None
    judged: dict[str, Judgement] = {_FIRST: place.judgement()} | told
    alike = _alike(list(judged.values()))
    questions = _questions(place) if alike else []
    segments = [segment.name for segment in place.segments]
    fields = [
        Field(
            key=f"at{at}",
            label=names_of(question, segments),
            choices=tuple(_offer(name, one, question) for name, one in judged.items()),
        )
        for at, question in enumerate(questions)
    ] or [Field(key="whole", label="estimate", choices=tuple(judged))]
    names = list(judged)

    def take(typed: Mapping[str, str]) -> bool:
        if alike:
            picked = {
                question: judged[names[fields[at].choices.index(typed[f"at{at}"])]]
                for at, question in enumerate(questions)
            }
            judgement = _mixed(judged[_FIRST], picked)
        else:
            judgement = judged[typed["whole"]]
        agree(pen, place, judgement, reason=typed["reason"])
        return True

    return Form(
        "Record what was agreed on",
        [*fields, Field(key="reason", label="Reason", hint="why this is what both stand for")],
        take,
        says=f"{place_named(row)}. ←→ picks whose choice stands, first or"
        f" {enumerate_words(list(told), 'or')}. It replaces every choice here.",
        does="record it",
    )


def _alike(judged: Sequence[Judgement]) -> bool:
    """Return whether all judged the same zones by the same handbook, so that factors can mix."""

    def shape(one: Judgement) -> object:
        zones = [(s.name, s.perimeter_percent) for s in one.segments or ()]
        return one.handbook, one.setting, zones

    return all(shape(one) == shape(judged[0]) for one in judged)


def _questions(place: Place) -> list[Question]:
    return [(zone, factor) for factor in factors_of(place.part.setting) for zone in place.zones]


def _choice(judged: Judgement, question: Question) -> Choice | None:
    segment, factor = question
    for one in judged.segments or ():
        if one.name == segment:
            return one.factors[factor]
    return judged.factors[factor] if judged.factors else None


def _offer(name: str, judged: Judgement, question: Question) -> str:
    choice = _choice(judged, question)
    if choice is None:
        return f"{name}: open"
    told = [printable(choice.grade)] if choice.grade else []
    told += [
        f"{word.replace('_', ' ')} {printable(str(value))}"
        for word, value in choice.criteria().items()
    ]
    told += [show_value(choice.best)] if choice.best is not None else []
    return f"{name}: {', '.join(told) or 'own range'}"


def _mixed(first: Judgement, picked: Mapping[Question, Judgement]) -> Judgement:
    """Return the first judgement with each factor as somebody picked has it."""

    def factors(zone: str | None) -> Factors:
        chosen: dict[Factor, Choice | None] = {
            factor: _choice(judged, (segment, factor))
            for (segment, factor), judged in picked.items()
            if segment == zone
        }
        return Factors(**chosen)  # type: ignore[arg-type]

    if first.segments is None:
        return replace(first, factors=factors(None))
    told_apart = tuple(
        Segment(name=s.name, perimeter_percent=s.perimeter_percent, factors=factors(s.name))
        for s in first.segments
    )
    return replace(first, segments=told_apart)
