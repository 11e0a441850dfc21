"""The survey as a table: one row for each reach, part and flow condition."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace

from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.custody.status import ACCEPTED, CHANGED, INCOMPLETE, RETURNED, UNVISITED
from roughness.desk.conflicting import conflict_findings
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place, Question, place_in
from roughness.desk.verdicts import status_in
from roughness.errors import RoughnessError
from roughness.findings import Estimated, Finding, find_over_survey
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import enumerate_words
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.survey.words import FACTORS, MULTIPLIER, Factor
from roughness.trail.conflicts import Conflict
from roughness.trail.lines import Line
from roughness.trail.review_state import NOT_REVIEWED, FindingAnswer, ReviewState
from roughness.trail.state import Adopted, PartState, ReachState


@dataclass(frozen=True, kw_only=True)
class Row:
    """What stands for one part of one reach under one flow condition."""

    order: int
    """Place of the reach in the survey's order, 0 for the first."""
    reach: Reach
    part: Part | None = None
    """None where the reach has no part yet."""
    condition: FlowCondition | None = None
    place: Place | None = None
    estimate: Estimate | None = None
    status: str = UNVISITED
    findings: tuple[Finding, ...] = ()
    visit: Visit | None = None
    estimated_by: str | None = None
    estimated_at: str | None = None
    trail_head: str | None = None
    review: ReviewState = NOT_REVIEWED
    supported: frozenset[Factor] = frozenset()
    """Factors that a photo or document is filed for."""

    @property
    def verdict(self) -> Line | None:
        """The line of the acceptance or return that the status rests on."""
        if self.status == RETURNED and self.review.standing_return:
            return self.review.standing_return.line
        if self.status in (ACCEPTED, CHANGED) and self.review.acceptance:
            return self.review.acceptance.line
        return None

    @property
    def reviewed_by(self) -> str | None:
        """Who accepted or returned it, where that is the status."""
        return self.verdict.by if self.verdict else None

    @property
    def reviewed_at(self) -> str | None:
        """When it was accepted or returned, where that is the status."""
        return self.verdict.at if self.verdict else None

    def answer_to(self, finding: Finding) -> FindingAnswer | None:
        """Return what was answered to a finding; a ``stop`` is not answered but mended."""
        if finding.level == "stop":
            return None
        return self.review.finding_answers.get((finding.rule, finding.factor, finding.says))

    @property
    def open(self) -> tuple[Finding, ...]:
        """The findings that nobody answered, worst first."""
        return tuple(finding for finding in self.findings if not self.answer_to(finding))

    @property
    def adopted(self) -> Adopted | None:
        """The n that somebody adopted in place of the estimate."""
        return self.place.state.adopted if self.place and self.place.state else None

    @property
    def n_adopted(self) -> float | None:
        """The value that goes to the model."""
        if self.adopted is not None:
            return self.adopted.n
        return self.estimate.n.best if self.estimate else None

    def entry(self, question: Question) -> FactorEstimate | None:
        """Return what the estimate says of a question; of the whole part, any segment's word."""
        segment, factor = question
        return next(
            (
                entry
                for entry in (self.estimate.factors if self.estimate else ())
                if entry.factor == factor and segment in (None, entry.segment)
            ),
            None,
        )

    @property
    def stands_stopped(self) -> bool:
        """Whether a finding says not to accept the row as it is."""
        return any(finding.level == "stop" for finding in self.findings)


def rows(survey: SurveyFolder) -> list[Row]:
    """Return the whole survey, reaches in stream order, with the findings over it."""
    found = [
        row
        for order, noted in enumerate(survey.state.reaches)
        for row in rows_of_reach(survey, noted.reach, order)
    ]
    return with_survey_findings(found)


def rows_of_reach(survey: SurveyFolder, reach: str, order: int = 0) -> list[Row]:
    """Return the rows of one reach, without the findings that need its neighbours.

    A reach whose trail cannot be read is one row with a ``stop`` finding.
    """
    try:
        listed, state = survey.reach(reach), survey.reach_state(reach)
        trail = survey.reach_trail(reach)
    except RoughnessError as error:
        return [_unreadable(survey.noted_reach(reach), order, str(error))]
    head = trail.heads[0] if len(trail.heads) == 1 else None
    bare = Row(order=order, reach=listed, visit=_last(state.visits), trail_head=head)
    found = [
        _row(survey, bare, state, part, condition) for part, condition in _pairs(survey, state)
    ]
    found = found or [replace(bare, status=INCOMPLETE if state.visits else UNVISITED)]
    faults = list(_trail_findings(survey, reach, state))
    apart = survey.conflicts(reach)
    return [
        replace(row, findings=(*faults, *_of_conflicts(row, apart), *row.findings)) for row in found
    ]


def _of_conflicts(row: Row, apart: tuple[Conflict, ...]) -> Iterator[Finding]:
    if row.place is not None:
        yield from conflict_findings(row.place, apart)


def _unreadable(reach: Reach, order: int, why: str) -> Row:
    finding = Finding("stop", "trail-unreadable", None, f"The reach cannot be read: {why}.")
    return Row(order=order, reach=reach, status=INCOMPLETE, findings=(finding,))


def _trail_findings(survey: SurveyFolder, reach: str, state: ReachState) -> Iterator[Finding]:
    trail = survey.reach_trail(reach)
    for fault in trail.broken[:1]:
        yield Finding("stop", "trail-broken", None, f"The trail is broken ({fault}): read-only.")
    if trail.to_be_merged:
        ends = enumerate_words(
            [str(n) for n in sorted(trail.by_hash[h].number for h in trail.heads)]
        )
        says = (
            f"Written apart: {trail.file} has {len(trail.heads)} ends (lines {ends});"
            " `roughness merge` unites them."
        )
        yield Finding("stop", "to-be-merged", None, says)
    if trail.newer or state.unknown:
        says = "A newer version of the tool wrote lines that this one keeps but does not know."
        yield Finding("tell", "newer-lines", None, says)
    for fault in state.unusable[:1]:
        yield Finding("ask", "line-without-effect", None, f"A line has no effect ({fault}).")


def _pairs(survey: SurveyFolder, state: ReachState) -> list[tuple[str, str]]:
    """Return the parts and conditions that n is wanted for, and those that were touched."""
    wanted = [
        (part.part, condition.condition)
        for condition in survey.state.conditions
        for part in state.parts
        # Nothing flows on a flood plain while the stream keeps to its bed.
        if not (part.setting == "flood-plain" and condition.bank == "in bank")
    ]
    wanted += [(place.part, place.condition) for place in state.places.values()]
    unique = {
        (same_name_key(part), same_name_key(cond)): (part, cond) for part, cond in wanted[::-1]
    }
    order = {key: at for at, key in reversed(list(enumerate(map(_key, wanted))))}
    return sorted(unique.values(), key=lambda pair: order[_key(pair)])


def _key(pair: tuple[str, str]) -> tuple[str, str]:
    return same_name_key(pair[0]), same_name_key(pair[1])


def _row(survey: SurveyFolder, bare: Row, state: ReachState, part: str, condition: str) -> Row:
    try:
        place = place_in(survey, bare.reach, state, part, condition)
        estimate = place.estimate()
    except RoughnessError as error:
        finding = Finding("stop", "cannot-be-estimated", None, f"No estimate: {error}.")
        return replace(
            bare,
            part=Part(part=part, setting="channel"),
            condition=FlowCondition(condition=condition),
            status=CHANGED if state.review(part, condition).acceptance else INCOMPLETE,
            review=state.review(part, condition),
            findings=(finding,),
        )
    touched = place.state is not None
    said = _last_judged(state, place.state) if place.state else None
    visit = visit_of(state, place)
    return replace(
        bare,
        part=place.part,
        condition=place.condition,
        place=place,
        estimate=estimate,
        status=status_in(
            survey, place, complete=estimate is not None, visited=bool(touched or visit)
        ),
        review=state.review(part, condition),
        supported=_supported(state, place),
        findings=(*_of_edition(place), *(estimate.findings if estimate else ())),
        visit=visit,
        estimated_by=said.by if said else None,
        estimated_at=said.at if said else None,
    )


def _of_edition(place: Place) -> Iterator[Finding]:
    """Say that n is computed from another edition of the table than the choices were made from."""
    answered = [(q[1], standing) for q in place.questions if (standing := place.at(*q))]
    others = {f for f, chosen in answered if chosen.handbook_sha256 != place.handbook.sha256}
    if others:
        named = enumerate_words([factor for factor in FACTORS if factor in others])
        says = (
            f"Chosen from another edition of {printable(place.handbook.key)} than the one that is"
            f" here now: {named}; bring that edition back, or look at each choice again."
        )
        yield Finding("stop", "other-edition", None, says)


def _supported(state: ReachState, place: Place) -> frozenset[Factor]:
    """Return the factors that evidence of the reach is filed for, here or for all of it."""
    here = _key((place.part.part, place.condition.condition))
    return frozenset(
        factor
        for filed in state.evidence
        if _key((filed.evidence.part or here[0], filed.evidence.condition or here[1])) == here
        for factor in filed.evidence.factors or ()
    )


def _last_judged(reach: ReachState, state: PartState) -> Line | None:
    """Return the last line that the estimate rests on; adopting a value is none."""
    judged = {c.line.hash for by_factor in state.choices.values() for c in by_factor.values()}
    judged |= {state.gate_line.hash} if state.gate_line else set()
    return next((line for line in reversed(reach.effective) if line.hash in judged), None)


def visit_of(state: ReachState, place: Place) -> Visit | None:
    """Return the visit that a place was judged on: the one it names, else the last one."""
    named = place.state.visit if place.state else None
    if named is None:
        return _last(state.visits)
    wanted = same_name_key(named)
    known = next((v for v in state.visits if same_name_key(v.visit) == wanted), None)
    return known or Visit(visit=named)


def _last(visits: tuple[Visit, ...]) -> Visit | None:
    return visits[-1] if visits else None


def with_survey_findings(found: list[Row]) -> list[Row]:
    """Return the rows with what the rules over a survey say about each."""
    facts = [_estimated(row) for row in found if row.estimate is not None]
    more: dict[tuple[str, str, str], list[Finding]] = {}
    for placed in find_over_survey(facts):
        key = placed.reach, placed.part, placed.condition
        more.setdefault(key, []).append(placed.finding)
    return [
        replace(row, findings=worst_first([*row.findings, *more.get(_named(row), [])]))
        for row in found
    ]


def worst_first(found: Iterable[Finding]) -> tuple[Finding, ...]:
    """Return findings in the order stop, ask, tell, otherwise as they came."""
    levels = ("stop", "ask", "tell")
    return tuple(sorted(dict.fromkeys(found), key=lambda f: levels.index(f.level)))


def _named(row: Row) -> tuple[str, str, str]:
    return (
        row.reach.reach,
        row.part.part if row.part else "",
        row.condition.condition if row.condition else "",
    )


def _estimated(row: Row) -> Estimated:
    assert row.estimate and row.place
    reach, part, condition = _named(row)
    shares: dict[Factor, float] = dict.fromkeys(FACTORS, 0.0)
    for entry in row.estimate.factors:
        shares[entry.factor] += entry.share_of_variance
    return Estimated(
        reach=reach,
        order=row.order,
        part=part,
        condition=condition,
        n=row.estimate.n,
        p05=row.estimate.spread.p05,
        p95=row.estimate.spread.p95,
        adopted=row.adopted.n if row.adopted else None,
        jump_noted=bool(row.reach.note) or bool(row.adopted),
        shares=shares,
        backed=row.supported | {entry.factor for entry in row.estimate.factors if entry.note},
        unconfirmed=row.place.unconfirmed,
        visit_growth=row.visit.growth if row.visit else None,
        condition_growth=row.condition.growth if row.condition else None,
        made_by_record=row.place.made_by_record,
        visited=row.visit is not None,
        multiplier_over_bank=_multiplier_over_bank(row),
    )


def _multiplier_over_bank(row: Row) -> float | None:
    assert row.estimate and row.part and row.condition
    if row.part.setting != "channel" or row.condition.bank != "over bank":
        return None
    return max(e.best for e in row.estimate.factors if e.factor == MULTIPLIER)
