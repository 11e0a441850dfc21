"""Where the table of n for a model is written to."""

from collections.abc import Mapping
from pathlib import Path

from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row, rows
from roughness.exports.table import table_of
from roughness.exports.writing import refuse_target, write_table
from roughness.quantities.foreign_text import printable
from roughness.reasoning.cautions import IN_ONE_LINE
from roughness.screens.form import Field, Form


def export_form(pen: Recorder) -> Form[Path]:
    """Ask for the file; the result is a place that may be written to."""
    folder = pen.survey.folder.resolve()

    def take(typed: Mapping[str, str]) -> Path:
        target = Path(typed["file"].strip()).expanduser()
        refuse_target(target, folder)
        return target

    usual = _from_here(folder.parent / f"{folder.name}-n.csv")
    return Form(
        "Export the table of n",
        [Field(key="file", label="File", value=str(usual), hint="ends in .csv or .json")],
        take,
        says=f"All reaches, parts and flow conditions. {IN_ONE_LINE}",
        does="write it",
    )


def write_export(survey: SurveyFolder, target: Path, found: list[Row] | None = None) -> str:
    """Write the table and say what was written, and what is not finished in it."""
    listed = rows(survey) if found is None else found
    written = write_table(table_of(survey, listed), target)
    names = " and ".join(printable(file.name) for file in written)
    without = sum(row.estimate is None for row in listed)
    stopped = sum(row.stands_stopped for row in listed)
    told = [f"{len(listed)} rows written to {names} in {printable(str(target.parent.resolve()))}"]
    told += [f"{without} without n"] if without else []
    told += [f"{stopped} with a stop finding"] if stopped else []
    return ", ".join(told)


def _from_here(path: Path) -> Path:
    here = Path.cwd()
    return path.relative_to(here) if path.is_relative_to(here) else path
