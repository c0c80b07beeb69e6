"""Derivations: every computed number of an answer as a line that a reader can redo by hand.

``whole`` writes them, ``book`` is what they are written in, ``ground`` what they start from. The numbers are computed
anew from the register of equations; a test holds them equal to those of the answer. Nothing here solves anything: roots
are taken from the calculation and shown with what they leave over.
"""
