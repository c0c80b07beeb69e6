"""Designs by the million, from a file into a file: `python -m loopslack.bulk IN OUT`.

Lines in and out are those of the stream of the service. `run` is the way from one file to the other, `crew` who
does the work; a fleet of machines brings a crew of its own.
"""
