"""The columns of the table of n: name, type and what each one holds."""

from dataclasses import dataclass
from typing import Final, Literal

from roughness.survey.words import FACTORS

Type = Literal["string", "number", "any"]


@dataclass(frozen=True, slots=True)
class Column:
    """One column; ``any`` holds a number, or text where bed and banks are told apart."""

    name: str
    type: Type
    description: str


_PERCENTILES = {"p05": 5, "p16": 16, "p50": 50, "p84": 84, "p95": 95}

_ABOUT_N: Final = (
    Column("survey", "string", "name of the survey"),
    Column("stream", "string", "name of the stream"),
    Column("reach", "string", "name of the reach"),
    Column("part", "string", "part of the cross-section; left and right look downstream"),
    Column("setting", "string", "channel or flood-plain: which table applies"),
    Column("condition", "string", "flow condition the n is for"),
    Column("growth", "string", "state of growth of that condition"),
    Column("from", "number", "distance along the stream where the reach begins, in length_unit"),
    Column("to", "number", "distance along the stream where the reach ends, in length_unit"),
    Column("part_from", "number", "lateral limit, m from the left end of the section"),
    Column("part_to", "number", "lateral limit, m from the left end of the section"),
    Column("n_low", "number", "Manning's n, s/m^(1/3): all factors at their low"),
    Column("n_best", "number", "Manning's n, s/m^(1/3): all factors at their best"),
    Column("n_high", "number", "Manning's n, s/m^(1/3): all factors at their high"),
    *(
        Column(
            name,
            "number",
            f"{percent} % of the spread of the choices, s/m^(1/3); the grades taken as right",
        )
        for name, percent in _PERCENTILES.items()
    ),
    Column("n_adopted", "number", "n that goes to the model: the best, unless another is adopted"),
    Column("adopted_reason", "string", "why another n than the estimate was adopted"),
    Column("status", "string", "how far the row is"),
    Column("visited", "string", "date of the visit; its name where no date is known"),
    Column("estimated_by", "string", "who judged last; a claim, no proof"),
    Column("estimated_at", "string", "when, RFC 3339"),
    Column("reviewed_by", "string", "who accepted or returned it, where status says so"),
    Column("reviewed_at", "string", "when, RFC 3339"),
    Column(
        "open_findings",
        "string",
        "level:rule of each finding not answered, worst first, parted by blanks",
    ),
    Column("handbook", "string", "key of the handbook whose table was used"),
    Column("handbook_sha256", "string", "sha256 of its file, line ends taken as LF"),
    Column("trail_head", "string", "sha256 of the last line of the reach's trail"),
)

COLUMNS: Final[tuple[Column, ...]] = (
    *_ABOUT_N,
    *(
        column
        for factor in FACTORS
        for column in (
            Column(f"{factor}_grade", "string", f"grade of {factor} in the handbook's table"),
            Column(
                f"{factor}_value",
                "any",
                f"best value of {factor}; as text where bed and banks are told apart",
            ),
            Column(f"{factor}_note", "string", f"note on {factor}"),
        )
    ),
)
