"""One part of a reach under one flow condition as text: the reasoning behind its n."""

from collections.abc import Iterator

from roughness.assessment.estimate import Estimate
from roughness.commands.lengths import show_length
from roughness.commands.plain_tables import table, wrapped
from roughness.desk.places import Place, Question
from roughness.desk.rows import Row
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, show_n, show_range, show_value
from roughness.trail.telling import describe_line


def place_lines(row: Row, units: str | None = None) -> Iterator[str]:
    """Tell one row of a survey whole, in lines of at most 80 cells."""
    if row.place is not None:
        yield from wrapped(f"{_title(row.place)}: {row.status}")
        yield from _verdict_lines(row)
        yield from _about_place(row, row.place, units)
    else:
        part = f"{printable(row.part.part)}: " if row.part else ""
        yield from wrapped(f"{part}{row.status}")
        if row.part is None:
            yield "  no part of the cross-section was described yet"
    yield from finding_lines(row.open, "  ")
    yield from _answered_lines(row)
    yield from _question_lines(row)
    if row.estimate:
        yield "  Reasoning:"
        for sentence in row.estimate.reasoning:
            yield from wrapped(printable(sentence), "    ", "      ")


def _verdict_lines(row: Row) -> Iterator[str]:
    if row.verdict:
        text = describe_line(row.verdict)
        who = f"{printable(row.verdict.by)}, {row.verdict.at}"
        yield from wrapped(f"Reviewed: {text} ({who})", "  ", "    ")


def _answered_lines(row: Row) -> Iterator[str]:
    answered = [(finding, row.answer_to(finding)) for finding in row.findings]
    if any(answer for _, answer in answered):
        yield "  Findings with answers:"
    for finding, answer in answered:
        if answer:
            text = f"{finding.level}: {printable(finding.says)} [{finding.rule}]"
            yield from wrapped(text, "    ", "      ")
            said = f"{printable(answer.line.by)}: {printable(answer.said.text)}"
            yield from wrapped(said, "      ", "        ")


def _question_lines(row: Row) -> Iterator[str]:
    if row.review.questions:
        yield "  Questions:"
    for asked in row.review.questions:
        about = f"{asked.question.factor}: " if asked.question.factor else ""
        state = " (open)" if asked.is_open else ""
        text = f"{printable(asked.line.by)}: {about}{printable(asked.question.text)}{state}"
        yield from wrapped(text, "    ", "      ")
        for one in asked.answers:
            told = f"{printable(one.line.by)}: {printable(one.answer.text)}"
            yield from wrapped(told, "      ", "        ")


def _title(place: Place) -> str:
    return (
        f"{printable(place.part.part)} at {printable(place.condition.condition)}"
        f" ({place.part.setting}, {place.handbook.key})"
    )


def _about_place(row: Row, place: Place, units: str | None) -> Iterator[str]:
    if row.estimate:
        yield from n_lines(row.estimate, "  ")
    if row.adopted:
        limits = [
            f"{word} {show_n(value)}"
            for word, value in (("low", row.adopted.low), ("high", row.adopted.high))
            if value is not None
        ]
        told = ", ".join([f"n {show_n(row.adopted.n)}", *limits])
        who = f"({printable(row.adopted.line.by)}, {row.adopted.line.at})"
        yield from wrapped(f"Adopted: {told}. {printable(row.adopted.reason)} {who}", "  ", "    ")
    if place.depth_m is not None:
        yield f"  Mean depth: {show_length(place.depth_m, 'm', units)}"
    if place.made_by_record:
        yield f"  Made by `record`: the {enumerate_words(place.made_by_record)}"
    yield from _factors(row, place)
    if place.missing:
        named = [question_in_words(question) for question in place.missing]
        yield from wrapped(f"Missing: {', '.join(named)}", "  ", "    ")


def n_lines(estimate: Estimate, indent: str) -> Iterator[str]:
    """Tell n, its range, the spread of the choices and what people differ by."""
    yield f"{indent}n {show_n(estimate.n.best)}, range {show_range(estimate.n)}"
    spread = estimate.spread
    yield (
        f"{indent}Spread of the choices: {show_n(spread.p05)} to {show_n(spread.p95)} (5 to 95 %)"
    )
    if estimate.people:
        yield from wrapped(
            f"What experienced people differ by: {show_n(estimate.people.p05)} to"
            f" {show_n(estimate.people.p95)} (5 to 95 %, from {estimate.people.provenance})",
            indent,
            f"{indent}  ",
        )


def _factors(row: Row, place: Place) -> Iterator[str]:
    answered = [question for question in place.questions if place.at(*question)]
    if not answered:
        return
    yield "  Factors:"
    lines = [_factor_cells(row, place, question) for question in answered]
    aligned = table([cells for cells, _ in lines], give=(0, 1, 5), indent=4)
    for line, (_, more) in zip(aligned, lines, strict=True):
        yield line
        for text in more:
            yield from wrapped(printable(text), "      ", "        ")


def _factor_cells(row: Row, place: Place, question: Question) -> tuple[list[str], list[str]]:
    standing = place.at(*question)
    assert standing is not None
    entry = row.entry(question)
    value, limits = show_value(entry.best) if entry else "", ""
    if entry and entry.low < entry.high:
        limits = f"{show_value(entry.low)} to {show_value(entry.high)}"
    grade = (entry.grade if entry else standing.choice.grade) or "own value"
    more = [f"note: {standing.choice.note}"] if standing.choice.note else []
    if standing.carried_from:
        source = standing.carried_from
        more.append(
            f"carried over from {source.reach}, {source.part}, {source.condition}; not confirmed"
        )
    if standing.inherited_from:
        more.append(f"taken over from the flow condition {standing.inherited_from}")
    said = [printable(standing.at[:10]), printable(standing.by)]
    cells = [question_in_words(question), printable(grade), value, limits, *said]
    return cells, more


def question_in_words(question: Question) -> str:
    """Return a segment and factor as one reads them: ``bed: base``."""
    segment, factor = question
    return factor if segment is None else f"{printable(segment)}: {factor}"


def finding_lines(findings: tuple[Finding, ...], indent: str) -> Iterator[str]:
    """Tell findings, worst first as they come."""
    if findings:
        yield f"{indent}Findings:"
    for finding in findings:
        yield from wrapped(
            f"{finding.level}: {printable(finding.says)} [{finding.rule}]",
            f"{indent}  ",
            f"{indent}    ",
        )
