"""Finds and reads what travels with the program or the survey: handbooks, the demo survey.

::

    places     where the shipped tables and the demo survey lie
    editions   which files were ever shipped, by hash
    folders    the handbook files of one folder: by key, read once
    facts      published tables that are no handbook
    handbooks  load_handbook and what the rest of the program asks for
"""
