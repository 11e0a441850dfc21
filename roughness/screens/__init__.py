"""The screens; the only room that knows Textual.

::

    app        the application, and how it is opened
    start      no survey yet: recent ones, the demo, a new one
    survey     the reaches with their n on one shared axis
    walk       one part under one flow condition, factor by factor
    handbook   the published tables, searchable
    help       what a screen is for, its keys, the words
"""
