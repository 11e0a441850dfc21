"""The format by the ending of the file's name, and files that are there whole."""

from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Final

from roughness.desk.whole_files import refuse_place, write_whole
from roughness.errors import InputError
from roughness.exports.as_csv import csv_bytes, schema_bytes
from roughness.exports.as_json import json_bytes
from roughness.exports.table import Table
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words

FORMATS: Final[Mapping[str, Callable[[Table], bytes]]] = {".csv": csv_bytes, ".json": json_bytes}
SCHEMA_ENDING: Final = ".schema.json"
_LATER: Final = (".geojson", ".xlsx", ".parquet")


def refuse_target(target: Path, survey: Path) -> None:
    """Say no to a file that cannot be written before anything is computed.

    Raises
    ------
    InputError
        Where the ending is not known or the file would lie inside the survey's folder.
    """
    where, known = printable(str(target)), enumerate_words(list(FORMATS), "or")
    ending = target.suffix.lower()
    if ending not in FORMATS:
        fault = "is not supported yet" if ending in _LATER else "is not known here"
        what = f"the ending {printable(ending)} {fault}" if ending else "it has no ending"
        raise InputError(what, where=where, wanted=f"name it {known}")
    refuse_place(target, survey)


def write_table(table: Table, target: Path) -> tuple[Path, ...]:
    """Write the table; return the files that were written, the table last.

    Raises
    ------
    NotKeptError
        Where the disk did not take one of them.
    """
    files = [target]
    if target.suffix.lower() == ".csv":
        beside = target.with_name(f"{target.name}{SCHEMA_ENDING}")
        write_whole(beside, schema_bytes(table))
        files.insert(0, beside)
    write_whole(target, FORMATS[target.suffix.lower()](table))
    return tuple(files)
