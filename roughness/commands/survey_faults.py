"""A survey whose own trail is broken may lack reaches: said beside every result."""

from roughness.commands import complain
from roughness.desk.checking import faults_of_survey
from roughness.desk.folder import SurveyFolder


def say_faults(survey: SurveyFolder) -> bool:
    """Say on standard error what is wrong with the survey's own trail; return whether it is."""
    faults = faults_of_survey(survey)
    for fault in faults:
        place = f"{fault.file} line {fault.line}" if fault.line else fault.file
        complain(f"reaches may be missing here: {place}: {fault.what}")
    return bool(faults)
