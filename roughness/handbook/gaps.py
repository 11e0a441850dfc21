"""Values that no published range of a factor holds, although some lie on either side."""

from roughness.handbook.tables import Handbook
from roughness.survey.words import Factor, Setting

# Tables that print 0.005 and then 0.006 mean no gap: it is a step of rounding.
_ROUNDING_STEP = 0.001 + 1e-9


def gap_around(
    handbook: Handbook, setting: Setting, factor: Factor, value: float
) -> tuple[float, float] | None:
    """Return the published gap, wider than 0.001, that holds ``value``.

    The rows of ``base`` are materials and not degrees of one scale: it has no gaps. Grades
    that are not published (``none``) bound none.

    Returns
    -------
    tuple of float, or None
        Lower and upper limit of the gap, both outside of it.
    """
    if factor == "base":
        return None
    published = [g for g in handbook.grades(setting, factor) if g.provenance != "ours"]
    below = [g.high for g in published if g.low <= value]
    above = [g.low for g in published if g.low > value]
    if not below or not above:
        return None
    low, high = max(below), min(above)
    return (low, high) if low < value and high - low > _ROUNDING_STEP else None
