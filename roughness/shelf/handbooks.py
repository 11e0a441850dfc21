"""Handbooks by key: the survey's or agency's own files first, then the shipped ones."""

from pathlib import Path

from roughness.errors import HandbookError, InputError, UnknownNameError
from roughness.handbook.tables import Handbook
from roughness.quantities.foreign_text import nearest, printable
from roughness.quantities.printing import enumerate_words
from roughness.shelf.editions import shipped_editions
from roughness.shelf.folders import Contents, contents, handbook_in, hash_in
from roughness.shelf.places import tables_folder
from roughness.survey.words import Setting


def load_handbook(key: str, folder: Path | None = None) -> Handbook:
    """Return a handbook: published factor tables with their citation and the file's hash.

    Parameters
    ----------
    key : str
        Key of the handbook: ``cowan-1956``, ``usgs-wsp-2339``, ``scs-1963``, or that of a
        file in ``folder``.
    folder : Path, optional
        A folder with further handbook files (``*.toml``), such as a survey's ``handbooks``.
        They go before the shipped ones. Under a shipped key only a copy of a shipped
        edition counts, and it wins over a newer one. Links out of the folder are not
        followed. The folder need not exist.

    Returns
    -------
    Handbook
        A file is parsed once, until it changes.

    Raises
    ------
    UnknownNameError
        Names the nearest key and the known ones.
    HandbookError
        Where the file cannot be used, two files have the key, or a file has a shipped key
        and is no shipped edition.

    Examples
    --------
    >>> handbook = load_handbook("usgs-wsp-2339")
    >>> grade = handbook.grade("channel", "obstruction", "minor")
    >>> grade.low, grade.high, grade.source, grade.provenance
    (0.005, 0.015, 'table 2', 'seen second hand')
    >>> [grade.key for grade in handbook.grades("flood-plain", "obstruction")]
    ['none', 'negligible', 'minor', 'appreciable']
    """
    own, shipped = contents(folder), contents(tables_folder())
    for found, place in ((own, folder), (shipped, tables_folder())):
        if key in found.claimed_twice:
            raise found.claimed_twice[key]
        if place is not None and key in found.files:
            if place is folder:
                _refuse_changed_edition(key, found.files[key], place)
            return handbook_in(found.files[key], place)
    raise _unknown(key, own, shipped)


def handbook_keys(folder: Path | None = None) -> tuple[str, ...]:
    """Return the keys that :func:`load_handbook` knows: the shipped ones, then the folder's own.

    >>> handbook_keys()
    ('cowan-1956', 'scs-1963', 'usgs-wsp-2339')
    """
    shipped = sorted(contents(tables_folder()).files)
    return (*shipped, *sorted(set(contents(folder).files) - set(shipped)))


def handbook_for(key: str, setting: Setting, folder: Path | None = None) -> tuple[Handbook, bool]:
    """Return the handbook that applies to a setting, and whether it was handed over.

    A handbook without a flood-plain table hands its plains to the one it names.

    Raises
    ------
    InputError
        Where neither has a table for the setting; and as :func:`load_handbook`.

    >>> handbook, handed_over = handbook_for("cowan-1956", "flood-plain")
    >>> handbook.key, handed_over
    ('usgs-wsp-2339', True)
    """
    asked = load_handbook(key, folder)
    if asked.has(setting):
        return asked, False
    if setting == "flood-plain" and asked.flood_plains_from is not None:
        other = load_handbook(asked.flood_plains_from, folder)
        if other.has(setting):
            return other, True
        raise InputError(
            f"the handbook {key} has no flood-plain table, and neither has {other.key}, "
            "to which it hands its plains",
            wanted="choose a handbook with one, such as usgs-wsp-2339",
        )
    raise InputError(
        f"the handbook {key} has no {setting} table",
        wanted="choose a handbook with one, such as usgs-wsp-2339",
    )


def unusable_handbooks(folder: Path | None) -> tuple[HandbookError, ...]:
    """Return what is wrong with the handbook files of a folder, one error a file."""
    found = contents(folder)
    faults = [*found.unread, *found.claimed_twice.values()]
    for key in found.files.keys() - found.claimed_twice.keys():
        try:
            load_handbook(key, folder)
        except HandbookError as error:
            faults.append(error)
    return tuple(sorted(faults, key=str))


def _refuse_changed_edition(key: str, path: Path, folder: Path) -> None:
    editions = shipped_editions().get(key)
    if editions is not None and hash_in(path, folder) not in editions:
        raise HandbookError(
            f"it has the key {key} of a shipped handbook and is no shipped edition of it",
            where=f"{path.parent.name}/{path.name}",
            wanted="give a changed table a key of its own",
        )


def _unknown(key: str, own: Contents, shipped: Contents) -> UnknownNameError:
    known = sorted({*own.files, *shipped.files})
    near, listed = nearest(key, known), f"known are {enumerate_words(known)}"
    hints = [f"{near}? {listed}" if near else listed]
    hints += [f"a file was not read ({error})" for error in own.unread]
    return UnknownNameError(f"no handbook has the key {printable(key)!r}", wanted="; ".join(hints))
