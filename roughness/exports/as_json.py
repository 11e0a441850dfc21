"""The table as JSON: ``{"about": {...}, "rows": [...]}``."""

import json

from roughness.exports.table import Table


def json_bytes(table: Table) -> bytes:
    """Return the table as JSON; what is not known is null, text is ASCII with escapes."""
    document = {"about": dict(table.about), "rows": [dict(row) for row in table.rows]}
    return f"{json.dumps(document, indent=2, allow_nan=False)}\n".encode("ascii")
