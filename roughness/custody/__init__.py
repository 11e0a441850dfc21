"""Who may move what to where: pure rules over plain values, without files or clock.

- :mod:`roughness.custody.status`: the one word for where a value stands
- :mod:`roughness.custody.acceptance`: what speaks against accepting, and what may be overruled
"""

from roughness.custody.acceptance import Case, Decision, Refusal, decide, may_accept
from roughness.custody.status import STATUSES, Standing, status_of

__all__ = [
    "STATUSES",
    "Case",
    "Decision",
    "Refusal",
    "Standing",
    "decide",
    "may_accept",
    "status_of",
]
