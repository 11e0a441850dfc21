"""Pages for people: values in, one self-contained HTML document out.

- :mod:`roughness.reports.survey_report`: the report of a survey, from its rows
- :mod:`roughness.reports.reach_sections`: what the report says of one reach
- :mod:`roughness.reports.ledger`: one line a factor: value, range, reason, source
- :mod:`roughness.reports.arithmetic`: n written out so that it can be rebuilt by hand
- :mod:`roughness.reports.drawings`: bars and ladders as coordinates; templates draw them
- :mod:`roughness.reports.photographs`: small pictures without metadata, inside the page
- :mod:`roughness.reports.field_sheet`: a sheet to take along
- :mod:`roughness.reports.pages`: templates with escaping, and how values are printed there

A page needs no network and no script, and its policy forbids both. Everything that came
from outside is text there, never markup. The same state gives the same bytes.
"""
