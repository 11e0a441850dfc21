"""The table of n for a model: values in, files out.

One table (:mod:`roughness.exports.table`) for every format; a format is one file that
turns it into bytes, and a line in :mod:`roughness.exports.writing`, which chooses by the
ending of the file's name.
"""
