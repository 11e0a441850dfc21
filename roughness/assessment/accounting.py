"""What the sentences of an estimate are told from."""

from collections.abc import Sequence
from dataclasses import asdict

from roughness import additive
from roughness.additive import Spread
from roughness.assessment.resolving import Resolved, shown_note
from roughness.assessment.zones import Zone
from roughness.findings import Finding
from roughness.handbook import Handbook
from roughness.quantities.ranges import Range
from roughness.reasoning import Account, Step
from roughness.reasoning import People as PeopleTold
from roughness.reasoning import Zone as ZoneTold
from roughness.survey.choices import Judgement
from roughness.survey.words import FACTORS


def account_of(
    handbook: Handbook,
    judgement: Judgement,
    zones: Sequence[Zone],
    n_and_spread: tuple[Range, Spread],
    shares: Sequence[Sequence[float]],
    found: Sequence[Finding],
) -> Account:
    """Return the account of one estimate; ``shares`` by zone, then by factor."""
    n, spread = n_and_spread
    people = additive.people(n.best)
    handed_over = judgement.handbook != handbook.key
    return Account(
        setting=judgement.setting,
        handbook=handbook.title,
        citation=f"{handbook.authors}, {handbook.year}",
        asked_handbook=judgement.handbook if handed_over else None,
        zones=tuple(_zone(handbook, z, row) for z, row in zip(zones, shares, strict=True)),
        n=n,
        p05=spread.p05,
        p95=spread.p95,
        shape=judgement.shape,
        dependence=judgement.dependence,
        people=PeopleTold(**asdict(people)) if people else None,
        stops=sum(finding.level == "stop" for finding in found),
        asks=sum(finding.level == "ask" for finding in found),
    )


def _zone(handbook: Handbook, zone: Zone, shares: Sequence[float]) -> ZoneTold:
    return ZoneTold(
        name=zone.name,
        perimeter_percent=zone.percent,
        n=additive.envelope(zone.ranges),
        steps=tuple(
            _step(handbook, zone.resolved[factor], share)
            for factor, share in zip(FACTORS, shares, strict=True)
        ),
    )


def _step(handbook: Handbook, entry: Resolved, share: float) -> Step:
    return Step(
        factor=entry.factor,
        symbol=handbook.symbols[entry.factor],
        range=entry.range,
        grade_name=entry.grade.name if entry.grade else None,
        published=entry.published,
        best_is_middle=bool(entry.grade and entry.grade.best_is_middle),
        own_best=entry.choice.best is not None,
        basis="measured" if entry.measured else "grade",
        measured_says=entry.candidates.says,
        source=entry.cited,
        note=shown_note(entry.choice),
        share_of_variance=share,
    )
