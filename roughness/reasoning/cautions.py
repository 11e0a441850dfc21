"""The words of caution that go with every value that leaves the tool."""

from typing import Final

CAUTIONS: Final = (
    "n is a judgement: calibrate it to observed flows where they exist.",
    "Check how sensitive the water level is to n.",
    "Local codes and a licensed practitioner's review come first.",
    "Not for decisions on life and limb by itself.",
)
IN_ONE_LINE: Final = (
    "n is a judgement: calibrate it to observed flows, check the water level's sensitivity,"
    " and let a licensed practitioner review it."
)
