"""Which handbook files were ever shipped under which key."""

from functools import cache

from roughness.shelf.places import tables_folder


@cache
def shipped_editions() -> dict[str, frozenset[str]]:
    """Return the hashes of all shipped editions by handbook key."""
    found: dict[str, frozenset[str]] = {}
    for line in (tables_folder() / "editions.txt").read_text(encoding="utf-8").splitlines():
        if line and not line.startswith("#"):
            sha256, key, _ = line.split()
            found[key] = found.get(key, frozenset()) | {sha256}
    return found
