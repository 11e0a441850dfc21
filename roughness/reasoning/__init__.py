"""Sentences from an estimate, the same through every door."""

from roughness.reasoning.account import Account, People, Step, Zone
from roughness.reasoning.sentences import sentences

__all__ = ["Account", "People", "Step", "Zone", "sentences"]
