"""Published facts that are no handbook: tables for comparison, as their bytes."""

from roughness.errors import RoughnessError
from roughness.shelf.places import tables_folder

CHANNEL_TYPES = "chow-1959-table-5-6.json"


def shipped_facts(name: str) -> bytes:
    """Return the file ``name`` of the shipped tables.

    Raises
    ------
    RoughnessError
        Where the installation is incomplete.
    """
    try:
        return (tables_folder() / name).read_bytes()
    except OSError:
        raise RoughnessError(
            f"the file {name} that belongs to the program is missing; install roughness again"
        ) from None
