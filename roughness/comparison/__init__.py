"""Other roads to n: from grain sizes, slope, sand regimes, plants and published channel types.

They stand beside the additive estimate and never change it. One function a formula::

    grain, gravel      the base value of beds of stones
    sand, slope        sand beds; whole reaches
    method, limits     what a method is, and between which limits it was tested
    bed_methods, reach_methods, methods    all methods with their domains
    streams            what was measured, as columns
    pebbles            grain sizes from counted stones, with their sampling error
    channel_types      published n of channel types, looked up by words
    other_roads, plants    the estimates of one reach
    missing, measures  which measurement would help most, and how to take it
    measured_streams, stream_files    streams with n from measured flow, and their files
    likeness, analogues    which of them are most like a reach, and why, in words
    blending           a judged n and measured ones weighed by their errors, to be looked at
"""

from roughness.comparison.channel_types import ChannelType, ChannelTypes, parse_channel_types
from roughness.comparison.method import Limit, Method
from roughness.comparison.methods import METHODS
from roughness.comparison.missing import Missing, missing
from roughness.comparison.other_roads import OtherN, of_channel_type, other_roads
from roughness.comparison.pebbles import PebbleCount, from_classes, from_stones
from roughness.comparison.plants import Stems, of_grass, of_stems
from roughness.comparison.streams import Streams

__all__ = [
    "METHODS",
    "ChannelType",
    "ChannelTypes",
    "Limit",
    "Method",
    "Missing",
    "OtherN",
    "PebbleCount",
    "Stems",
    "Streams",
    "from_classes",
    "from_stones",
    "missing",
    "of_channel_type",
    "of_grass",
    "of_stems",
    "other_roads",
    "parse_channel_types",
]
