"""Photos and documents of a survey: copied in whole, known by their hash, never altered.

- :mod:`roughness.evidence.naming`: the file of a piece of evidence, and which kinds are taken
- :mod:`roughness.evidence.sources`: opening a file from outside without being led astray
- :mod:`roughness.evidence.keeping`: a copy in ``SURVEY/evidence``, whole or not at all
- :mod:`roughness.evidence.holding`: whether what was kept is still there and the same
- :mod:`roughness.evidence.opening`: a picture from outside, within limits
- :mod:`roughness.evidence.metadata`: when and where a photo was taken, by its own word
- :mod:`roughness.evidence.pictures`: small pictures without metadata, and half blocks
- :mod:`roughness.evidence.watching`: files that appear in a folder and stand still

A file from outside may be anything: a link, a pipe, a picture that unfolds to gigabytes.
What cannot be taken or shown is said in one sentence.
"""
