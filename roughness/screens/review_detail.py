"""The selected line of a page in full: criterion, note, source, evidence, thread."""

from collections.abc import Iterator, Sequence

from rich.text import Text

from roughness.desk.evidence_lists import Item as Evidence
from roughness.desk.offers import resolved_at
from roughness.desk.places import Question
from roughness.desk.rows import Row
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, show_n, show_share, show_value
from roughness.reasoning.cautions import IN_ONE_LINE
from roughness.reasoning.factor_sentence import capital
from roughness.screens.review_ledger import Line, named, photos_of, sketch
from roughness.screens.review_words import SIGNS, day
from roughness.screens.walk_stack import origin_of
from roughness.screens.walk_table import figure
from roughness.survey.words import MULTIPLIER
from roughness.trail.review_state import Asked

_HELD = {"missing": " (the file is missing)", "changed": " (not the file that was attached)"}


def detail_of(line: Line, row: Row, items: Sequence[Evidence]) -> Text:
    """Return everything that is known of a line of the page, a paragraph each."""
    if line.asked is not None:
        told = _thread(row, line.asked)
    elif line.finding is not None:
        told = _finding(row, line.finding)
    elif line.question is not None:
        told = _factor(row, line.question, items)
    else:
        told = _sum(row, items)
    return Text("\n").join(told)


def _factor(row: Row, question: Question, items: Sequence[Evidence]) -> Iterator[Text]:
    place = row.place
    assert place is not None
    standing, resolved = place.at(*question), resolved_at(place, question)
    title = capital(named(question))
    if standing is None or resolved is None:
        yield Text(f"{title}: nobody chose it yet.", style="bold")
    else:
        grade = resolved.grade
        named_so = f"{title}, {printable(grade.name) if grade else 'own value'}. "
        note = standing.choice.note
        yield Text.assemble((named_so, "bold"), f"Note: {printable(note)}" if note else "No note.")
        for finding in row.open:
            if finding.factor == question[1] and finding.level != "tell":
                yield Text(f"{SIGNS[finding.level]} {finding.level}: {printable(finding.says)}")
        yield _criterion(row, question)
        said = f"{capital(origin_of(standing))}. " if origin_of(standing) else ""
        yield Text(f"{said}Chosen by {printable(standing.by)}, {day(standing.at)}.")
    yield _evidence(photos_of(row, question, items), "this factor")
    for thread in row.review.threads():
        first = thread[0].question
        if first.factor == question[1] and first.segment in (None, question[0]):
            yield from _told(thread)


def _criterion(row: Row, question: Question) -> Text:
    assert row.place is not None
    resolved = resolved_at(row.place, question)
    assert resolved is not None
    grade, published = resolved.grade, resolved.published
    told = f"Measured: {printable(resolved.candidates.says)}. " if resolved.candidates.says else ""
    if grade is not None:
        told += f"{printable(grade.criterion)} "
    cross = "×" if question[1] == MULTIPLIER else ""
    if published is not None and published.is_point:
        told += f"Published {cross}{figure(published.best)}. "
    elif published is not None:
        told += f"Published {cross}{figure(published.low)} to {figure(published.high)}. "
    return Text(f"{told}({row.place.handbook.key}, {printable(resolved.source)})")


def _evidence(found: Sequence[Evidence], what: str) -> Text:
    if not found:
        return Text(f"No photo or document is filed for {what}.")
    told = [_caption(item) for item in found]
    return Text(f"Evidence: {'; '.join(told)}.")


def _caption(item: Evidence) -> str:
    caption = item.evidence.caption
    name = printable(item.evidence.name)
    return (f"{printable(caption)} ({name})" if caption else name) + _HELD.get(item.held, "")


def _finding(row: Row, finding: Finding) -> Iterator[Text]:
    about = f" ({finding.factor})" if finding.factor else ""
    yield Text(f"{finding.level}{about}: {printable(finding.says)}", style="bold")
    answer = row.answer_to(finding)
    if answer is not None:
        said = f"{printable(answer.line.by)}, {day(answer.line.at)}: {printable(answer.said.text)}"
        yield Text(f"› {said}")
    elif finding.level == "stop":
        yield Text("It is mended in the walk, or accepted over with a reason (a).")
    elif finding.level == "ask":
        yield Text("Nobody answered it yet: ⏎ answers.")
    else:
        yield Text("Good to know; it asks for nothing. ⏎ may say something to it.")


def _thread(row: Row, asked: Asked) -> Iterator[Text]:
    thread = next(thread for thread in row.review.threads() if asked in thread)
    yield from _told(thread)
    if asked.is_open:
        yield Text("⏎ answers it; i asks on.")


def _told(thread: Sequence[Asked]) -> Iterator[Text]:
    for asked in thread:
        sign = "?" if asked.is_open else "·"
        text, by = printable(asked.question.text), printable(asked.line.by)
        yield Text(f"{sign} {by}, {day(asked.line.at)}: {text}", style="bold" * asked.is_open)
        for answer in asked.answers:
            by = printable(answer.line.by)
            yield Text(f"  › {by}, {day(answer.line.at)}: {printable(answer.answer.text)}")


def _sum(row: Row, items: Sequence[Evidence]) -> Iterator[Text]:
    adopted = row.adopted
    if adopted is not None:
        reason = f"because: {printable(adopted.reason)}"
        yield Text(f"◆ Adopted for the model: {show_n(adopted.n)}, {reason}", style="bold")
    place, estimate = row.place, row.estimate
    assert place is not None
    if estimate is None:
        names = enumerate_words([named(question) for question in place.missing])
        yield Text(f"No n yet; open: {names or 'what was chosen does not fit'}.", style="bold")
        return
    depth = f" Mean depth {show_value(place.depth_m)} m." if place.depth_m is not None else ""
    driver = estimate.driver
    drives = named((driver.segment, driver.factor))
    share = show_share(driver.share_of_variance)
    from_what = f"n {show_n(estimate.n.best)} from {sketch(row)}. "
    told = f"The {drives} makes {share} of the variance.{depth}"
    yield Text.assemble((from_what, "bold"), told)
    for thread in row.review.threads():
        if thread[0].question.factor is None:
            yield from _told(thread)
    yield _evidence(photos_of(row, None, items), "the whole")
    yield Text(IN_ONE_LINE)


def reasons(row: Row) -> list[Text]:
    """Return how n was arrived at, a sentence a step; empty where there is no n."""
    if row.estimate is None:
        return []
    told = [Text(sentence) for sentence in row.estimate.reasoning]
    return [Text("Reasoning", style="bold"), *told]


def whole_page(row: Row, line: Line, items: Sequence[Evidence]) -> str:
    """Return a line in full and every step of the reasoning, to be read."""
    told = [detail_of(line, row, items), Text(""), *reasons(row)]
    return "\n".join(text.plain for text in told)
