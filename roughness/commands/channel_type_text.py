"""Published n of channel types as text: what a cross-check looks up by words."""

from collections.abc import Iterator

from roughness.commands.plain_tables import wrapped
from roughness.comparison import ChannelType, ChannelTypes
from roughness.quantities.printing import show_value


def channel_type_lines(table: ChannelTypes) -> Iterator[str]:
    """Tell the table's source, then every row with its key, values and how they are known."""
    yield from wrapped(f"{table.key}: {table.citation}. No handbook: types of channel, to compare.")
    yield from wrapped(table.provenance, "  ")
    for note in table.notes:
        yield from wrapped(note, "  ")
    group = None
    for row in table.rows:
        if row.group != group:
            group = row.group
            yield ""
            yield from wrapped(group)
        yield from wrapped(_told(row), "  ", "    ")


def _told(row: ChannelType) -> str:
    usual = "no usual value" if row.normal is None else f"usual {show_value(row.normal)}"
    note = f" ({row.note})" if row.note else ""
    values = f"{show_value(row.low)} to {show_value(row.high)}, {usual}"
    return f"{row.key}: {row.name}; {values}; {row.provenance}{note}"
