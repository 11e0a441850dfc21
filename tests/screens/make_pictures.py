"""Make the pictures of the screens in the guide: `python tests/screens/make_pictures.py`.

The screens are opened on a copy of the demo survey and walked by keys, as a person would.
"""

import asyncio
import re
import tempfile
from collections.abc import Sequence
from pathlib import Path

from textual.pilot import Pilot

from roughness.desk.making import copy_demo
from roughness.screens.app import RoughnessApp

GUIDE = Path(__file__).parents[2] / "roughness" / "guide"
WIDE = (100, 30)
# From the walk of the part that was left in the middle.
KEYS: dict[str, Sequence[str]] = {
    "walk": ["escape", "up", "up", "enter", "backspace", "backspace", "backspace", "down"],
    "measured": ["1", "m"],
    "summary": ["escape", "up", "up", "enter"],
    "survey": ["escape", "f"],
    "handbook": ["1", "2", "h", "down", "down"],
}


async def picture(name: str, keys: Sequence[str], folder: Path) -> None:
    """Press ``keys`` in the demo survey and keep the picture of what is then on the screen."""
    copy_demo(folder)
    app = RoughnessApp(folder, "Isa Torvane", demo=True)
    async with app.run_test(size=WIDE) as pilot:
        await settled(pilot)
        for key in keys:
            await pilot.press(key)
            await settled(pilot)
        svg = app.export_screenshot(title="roughness")
    # A picture in the guide asks nothing of the network: fonts are the reader's own.
    svg = re.sub(r"@font-face\s*\{.*?\}|<!--.*?-->", "", svg, flags=re.DOTALL)
    svg = "\n".join(line.rstrip() for line in svg.splitlines() if line.strip())
    (GUIDE / f"{name}.svg").write_text(f"{svg}\n", encoding="utf-8", newline="\n")


async def settled(pilot: Pilot[None]) -> None:
    """Give everything that was set going the time to be drawn."""
    await pilot.pause(0.6)


async def main() -> None:
    """Make every picture."""
    for name, keys in KEYS.items():
        with tempfile.TemporaryDirectory() as folder:
            await picture(name, keys, Path(folder) / "demo")


if __name__ == "__main__":
    asyncio.run(main())
