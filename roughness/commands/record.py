"""Put an estimate into a reach's trail, with its part and condition."""

import argparse

from roughness.commands import DONE, STANDS_STOPPED
from roughness.commands.arguments import add_by, add_file, add_json, add_reach, add_survey
from roughness.commands.reading import read_given
from roughness.commands.results import print_json, print_lines


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Declare what the verb takes."""
    add_survey(parser)
    add_reach(parser)
    add_file(parser)
    add_by(parser)
    add_json(parser)


def run(args: argparse.Namespace) -> int:
    """Record one line and say what was kept; 1 where a ``stop`` finding stands."""
    from roughness.commands.kept import kept_document, kept_lines, say_repairs
    from roughness.commands.place_text import finding_lines, n_lines
    from roughness.desk.folder import SurveyFolder
    from roughness.desk.identity import who
    from roughness.desk.recording import Recorder
    from roughness.quantities.strict_json import LARGEST

    survey = SurveyFolder(args.survey)
    pen = Recorder(survey, who(args.by))
    reach = survey.noted_reach(args.reach).reach
    raw, where = read_given(args.file, LARGEST)
    line, estimate = pen.record(reach, raw, where)
    say_repairs(pen)
    if args.json:
        print_json(kept_document(reach, line) | {"estimate": estimate.as_document()})
    else:
        print_lines(kept_lines(reach, line))
        print_lines([*n_lines(estimate, "  "), *finding_lines(estimate.findings, "  ")])
    return STANDS_STOPPED if estimate.stands_stopped else DONE
