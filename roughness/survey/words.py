"""The fixed words of the method, as they stand in files and on screens."""

from typing import Final, Literal, get_args

Factor = Literal["base", "irregularity", "variation", "obstruction", "vegetation", "meander"]
Setting = Literal["channel", "flood-plain"]
Shape = Literal["triangular", "uniform"]
Regime = Literal["upper", "lower", "transition", "unknown"]
Plants = Literal["turf", "stemmy", "seedlings", "crops"]
Where = Literal["bed", "banks", "all"]
Edges = Literal["rounded", "sharp"]
Growth = Literal["leaf-on", "leaf-off", "after cutting", "dead stems", "unmaintained", "any"]
Bank = Literal["in bank", "over bank"]

FACTORS: Final[tuple[Factor, ...]] = get_args(Factor)
SETTINGS: Final[tuple[Setting, ...]] = get_args(Setting)
GROWTHS: Final[tuple[Growth, ...]] = get_args(Growth)
MULTIPLIER: Final[Factor] = "meander"
# A flood plain has no section variation (0) and no meander multiplier (1).
NOT_ON_FLOOD_PLAINS: Final[tuple[Factor, ...]] = ("variation", "meander")
NOT_APPLICABLE: Final = "not-applicable"
# What a second flow condition takes over from the first and does not ask again.
INHERITED: Final[tuple[Factor, ...]] = ("base", "irregularity", "variation")

MAIN_CHANNEL: Final = "main channel"
USUAL_PARTS: Final[dict[str, Setting]] = {
    MAIN_CHANNEL: "channel",
    "left flood plain": "flood-plain",
    "right flood plain": "flood-plain",
}
USUAL_TOLERANCE_CM: Final = 30.0


def factors_of(setting: Setting) -> tuple[Factor, ...]:
    """Return the factors that a setting asks for, in the order of publication."""
    if setting == "flood-plain":
        return tuple(f for f in FACTORS if f not in NOT_ON_FLOOD_PLAINS)
    return FACTORS
