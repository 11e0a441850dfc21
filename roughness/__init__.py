"""Manning's n for every reach of a surveyed stream, with its range and its reasons.

The public names are few and stay as they are: see ``__all__``. They are loaded when
they are first used, so that ``import roughness`` alone costs nearly nothing.
"""

from importlib import import_module

# Not from `typing`, which takes longer to load than all the rest of `--version`.
TYPE_CHECKING = False
if TYPE_CHECKING:
    from typing import Any

    from roughness.desk.estimating import estimate as estimate
    from roughness.shelf.handbooks import load_handbook as load_handbook

__version__ = "0.1.0"
__all__ = ["__version__", "estimate", "load_handbook"]

_WHERE = {
    "estimate": "roughness.desk.estimating",
    "load_handbook": "roughness.shelf.handbooks",
}


def __getattr__(name: str) -> "Any":
    if name in _WHERE:
        return getattr(import_module(_WHERE[name]), name)
    raise AttributeError(f"module 'roughness' has no attribute {name!r}")
