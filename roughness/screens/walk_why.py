"""What `?` says on the walk: the factor at hand in full, then the keys and signs."""

from typing import Final

from roughness.quantities.printing import show_addend, show_value
from roughness.screens.walk_course import Course
from roughness.survey.words import MULTIPLIER

KEYS: Final = """\
KEYS
1-9        take that grade and go on;  ↑ ↓ and Enter take the marked one
← →        move the best value in its range
⇧← ⇧→      widen or narrow the range (outside what is published: a note)
=          type low, best and high
m          type what was measured; it suggests a grade (B: both near an edge)
n          note: why this grade and value
c  C       carry over: this factor, or the whole part, from a like part;
           marked until Enter confirms it
Backspace  one factor back
u          undo: says first what it takes back
b          depth, in or over bank, moving sand, bed and banks apart
f          another flow condition: asks only what changes
g          at the end: adopt another n, with a reason
Space      at the end: all findings
p          photos and documents: look, attach, watch a folder for them
h  l       handbook; timeline of this reach
Esc        back to the survey; everything taken is kept already

SIGNS
›  marked row    ✓  taken    ◆  suggested by what was measured
~  carried over, not confirmed     =  from the other flow condition
n then     n with this grade, the factors to come adding nothing yet
water      change of the water level against what stands, for a wide channel
           of this depth at the same discharge
├─━█━─┤    thin: lowest to highest n; thick: spread of choices (5 to 95 %);
           block: best value; dots: what experienced people differ by

The spread of the choices takes the grades as right: it does not hold the
chance of a wrong grade.
"""


def why_text(course: Course) -> str:
    """Return the explanation of the factor at hand with all its grades, and the keys."""
    if course.question is None:
        return KEYS
    place, factor = course.place, course.question[1]
    handbook = place.handbook
    table = handbook.table(place.part.setting, factor)
    lines = [f"{table.title.upper()} ({handbook.symbols[factor]})", table.question, ""]
    for grade in table.grades:
        shown = show_value if factor == MULTIPLIER else show_addend
        span = shown(grade.low)
        if grade.low != grade.high:
            span += f" to {shown(grade.high)}"
        lines.append(f"{grade.name}, {span}: {grade.criterion} ({grade.cited})")
    lines += ["", *table.notes, f"{handbook.citation}; {table.source}."]
    if place.asked_handbook != handbook.key:
        lines.append(f"{place.asked_handbook} has no table for flood plains: this one serves.")
    return "\n".join([*lines, "", KEYS])
