"""Ranges, rounding and printing of n, units, and text that comes from outside.

n is printed nowhere but in :mod:`roughness.quantities.printing`.
"""
