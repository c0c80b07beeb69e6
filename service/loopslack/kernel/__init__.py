"""Kinds, units, values, equations, citations and errors. Knows nothing of loops."""
