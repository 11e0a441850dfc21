"""The nouns: stream, reach, part, visit, flow condition, and what was chosen and observed.

Plain frozen dataclasses without arithmetic. Where text becomes one of these (an estimate
file, a line of a trail), pydantic reads it by the same fields; ``__pydantic_config__``
makes that strict without this room importing pydantic.
"""
