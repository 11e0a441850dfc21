"""The note in a survey of what left it: a cut before that is seen later."""

import sys
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from roughness.desk.folder import SurveyFolder


def note_heads(survey: "SurveyFolder", by: str | None, why: str) -> None:
    """Note the ends of all trails; the ``export`` or ``report`` itself does not hang on it."""
    from roughness.desk.identity import who
    from roughness.desk.recording import Recorder
    from roughness.errors import RoughnessError
    from roughness.quantities.foreign_text import printable

    try:
        Recorder(survey, who(by)).note_heads(why)
    except RoughnessError as error:
        print(f"the survey does not note this {why}: {printable(str(error))}", file=sys.stderr)
