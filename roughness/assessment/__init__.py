"""Handbook and choices in, estimate with findings and reasoning out.

``estimate`` on the command line, the screens and batches all call :func:`assess`.
Pure: no files, no clock, no screen.
"""
