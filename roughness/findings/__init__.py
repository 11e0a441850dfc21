"""Judgement as data: one named rule each, a condition over columns, a sentence, a source."""
