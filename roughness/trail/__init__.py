"""The append-only record of a survey and of each of its reaches: lines, graph, fold.

One JSON object a line, each naming the hash of the line before it. What was written is
never changed; taking back is one more line. Everything here can be verified without any
hydraulics:

- :mod:`roughness.trail.lines`: one line and its hash
- :mod:`roughness.trail.reading`: a file read and verified; never writes
- :mod:`roughness.trail.locking`: who may write right now, and who has the survey open
- :mod:`roughness.trail.writing`: one more line, kept or not kept
- :mod:`roughness.trail.kinds`: what each kind of line says, and its published schema
- :mod:`roughness.trail.ordering`: the graph, and which lines still have an effect
- :mod:`roughness.trail.folding`: from lines to the state of a reach or a survey
- :mod:`roughness.trail.naming`: the file of a reach
- :mod:`roughness.trail.telling`: a line in a sentence; what a person may take back

Reading and locking import neither pydantic nor numpy.
"""
