"""One estimate without a survey: ``roughness estimate`` and ``from roughness import estimate``."""

import json
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from roughness.assessment.assessing import assess
from roughness.assessment.estimate import Estimate
from roughness.assessment.reading import judgement_from, read_judgement
from roughness.errors import InputError
from roughness.shelf.handbooks import handbook_for
from roughness.survey.choices import Judgement


def estimate(
    source: Judgement | Mapping[str, Any] | str | bytes,
    *,
    handbooks: Path | None = None,
    where: str = "estimate",
) -> Estimate:
    """Return n with its range, findings and reasoning for one part of one reach.

    Parameters
    ----------
    source : Judgement, mapping, str or bytes
        What was chosen: typed, as a mapping, or as JSON text of the same shape
        (``roughness schema estimate``).
    handbooks : Path, optional
        A folder with an agency's own handbook files.
    where : str
        How messages name the input.

    Raises
    ------
    InputError
        The first thing that is wrong, in one sentence.

    Examples
    --------
    >>> channel = estimate({
    ...     "handbook": "cowan-1956", "setting": "channel",
    ...     "factors": {
    ...         "base": {"grade": "earth"}, "irregularity": {"grade": "moderate"},
    ...         "variation": {"grade": "gradual"}, "obstruction": {"grade": "negligible"},
    ...         "vegetation": {"grade": "low"}, "meander": {"sinuosity": 1.3},
    ...     },
    ... })
    >>> round(channel.n.low, 6), round(channel.n.best, 6), round(channel.n.high, 6)
    (0.04025, 0.043125, 0.046)
    """
    judgement = _judgement(source, where)
    handbook, _ = handbook_for(judgement.handbook, judgement.setting, handbooks)
    return assess(handbook, judgement, where)


def _judgement(source: Judgement | Mapping[str, Any] | str | bytes, where: str) -> Judgement:
    if isinstance(source, Judgement):
        return source
    if isinstance(source, str | bytes):
        raw = source.encode() if isinstance(source, str) else source
        return read_judgement(raw, where)
    # A mapping made in Python may hold what JSON cannot (NaN, tuples): read it as JSON is read.
    try:
        document = json.loads(json.dumps(dict(source)))
    except (TypeError, ValueError) as error:
        raise InputError(f"not to be written as JSON ({error})", where=where) from None
    return judgement_from(document, where)
