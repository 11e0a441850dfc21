"""Published factor tables as data: no file is opened here.

::

    tables      Handbook, FactorTable, Grade: what a parsed handbook offers
    classes     the number classes a publication gives ('>= 5 and < 15')
    parsing     parse_handbook: TOML bytes in, Handbook out, or one sentence
    toml_shape  what a handbook file may hold (pydantic)
    checking    what a well-formed file can still get wrong
    criteria    candidates: the grades that a measured number leaves
    gaps        gap_around: values that lie between two published ranges
"""

from roughness.handbook.criteria import Candidates, candidates
from roughness.handbook.gaps import gap_around
from roughness.handbook.parsing import parse_handbook
from roughness.handbook.tables import FactorTable, Grade, Handbook

__all__ = [
    "Candidates",
    "FactorTable",
    "Grade",
    "Handbook",
    "candidates",
    "gap_around",
    "parse_handbook",
]
