"""All sentences of an estimate, one a step, in the order in which n comes about."""

from collections.abc import Iterator, Sequence
from math import fsum
from typing import Final

from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import (
    enumerate_words,
    show_n,
    show_range,
    show_share,
    show_value,
)
from roughness.reasoning.account import Account, Step, Zone
from roughness.reasoning.factor_sentence import TITLES, capital, factor_sentence
from roughness.survey.words import MULTIPLIER, NOT_ON_FLOOD_PLAINS

SHARE_OF_A_DRIVER: Final = 1 / 3
COUNTS: Final = {4: "four", 5: "five"}


def sentences(account: Account) -> tuple[str, ...]:
    """Return the reasoning behind an estimate.

    Parameters
    ----------
    account : Account
        What was chosen and what came of it; texts from outside are made printable here.

    Returns
    -------
    tuple of str
        One sentence a step: handbook, factors, sum and multiplier, bed and banks put
        together, what drives n, spread, what people differ by, open findings.
    """
    return tuple(_all(account))


def _all(account: Account) -> Iterator[str]:
    yield _handbook(account)
    for zone in account.zones:
        for step in _applying(account, zone):
            yield factor_sentence(step, zone.name)
        yield _sum(account, zone)
    if len(account.zones) > 1:
        yield _apart(account.zones)
        yield _together(account)
    yield _driver(account)
    yield _spread(account)
    if account.people:
        yield _people(account)
    if account.stops or account.asks:
        yield _open_findings(account)


def _applying(account: Account, zone: Zone) -> list[Step]:
    on_plain = account.setting == "flood-plain"
    return [s for s in zone.steps if not (on_plain and s.factor in NOT_ON_FLOOD_PLAINS)]


def _handbook(account: Account) -> str:
    setting = "channel" if account.setting == "channel" else "flood plain"
    source = f"{printable(account.handbook)} ({printable(account.citation)})"
    if account.asked_handbook:
        return (
            f"The part is a {setting}, for which {printable(account.asked_handbook)} has no table; "
            f"its factors come from {source}."
        )
    return f"The part is a {setting}; its factors come from {source}."


def _sum(account: Account, zone: Zone) -> str:
    steps = _applying(account, zone)
    added = [step for step in steps if step.factor != MULTIPLIER]
    total = show_n(fsum(step.range.best for step in added))
    of = f" for {printable(zone.name)}" if zone.name else ""
    count = COUNTS.get(len(added), str(len(added)))
    n = f"n {show_n(zone.n.best)}, {_limits(zone)}"
    multiplier = next((step for step in steps if step.factor == MULTIPLIER), None)
    if multiplier is None:
        return f"The sum of {count}{of} is {n}; a flood plain has no multiplier."
    grade = f" for {printable(multiplier.grade_name)} meandering" if multiplier.grade_name else ""
    times = f"times {printable(multiplier.symbol)} {show_value(multiplier.range.best)}{grade}"
    return f"The sum of {count}{of} is {total}; {times} gives {n}."


def _limits(zone: Zone) -> str:
    return "without a range" if zone.n.is_point else f"from {show_range(zone.n)}"


def _apart(zones: Sequence[Zone]) -> str:
    told = [
        f"{printable(zone.name or '')} with {show_value(zone.perimeter_percent)} % of the wetted "
        f"perimeter and n {show_n(zone.n.best)}"
        for zone in zones
    ]
    return f"The part was judged in {len(zones)} segments: {enumerate_words(told)}."


def _together(account: Account) -> str:
    return (
        "They are put together as if the water ran equally fast along each of them "
        f"(Horton and Einstein), which gives n {show_n(account.n.best)}, from "
        f"{show_range(account.n)}."
    )


def _driver(account: Account) -> str:
    steps = [(zone, step) for zone in account.zones for step in _applying(account, zone)]
    zone, step = max(steps, key=lambda pair: pair[1].share_of_variance)
    if step.share_of_variance <= 0:
        return "No range has any width, so nothing drives n."
    of = f" of {printable(zone.name)}" if zone.name else ""
    named, share = f"{TITLES[step.factor]}{of}", show_share(step.share_of_variance)
    if step.share_of_variance >= SHARE_OF_A_DRIVER:
        return f"{capital(named)} drives n: {share} of the variance."
    return f"No single factor drives n: the largest share of the variance, {share}, is {named}."


def _spread(account: Account) -> str:
    if account.n.is_point:
        return "Without ranges the choices have no spread; that does not make n certain."
    return (
        f"The spread of the choices is {show_n(account.p05)} to {show_n(account.p95)} (5 % to "
        f"95 %), with {account.shape} ranges and a dependence of {show_value(account.dependence)}; "
        "it takes every grade as right."
    )


def _people(account: Account) -> str:
    people = account.people
    assert people is not None
    mark = ", from memory" if people.provenance == "memory" else ""
    return (
        "Experienced people who judge one and the same reach differ more or less from "
        f"{show_n(people.p05)} to {show_n(people.p95)} (5 % to 95 %; {printable(people.source)}"
        f"{mark})."
    )


def _open_findings(account: Account) -> str:
    told = []
    if account.stops:
        told.append(f"{account.stops} {'says' if account.stops == 1 else 'say'} stop")
    if account.asks:
        told.append(f"{account.asks} {'asks' if account.asks == 1 else 'ask'} for an answer")
    return f"Of the findings, {enumerate_words(told)}."
