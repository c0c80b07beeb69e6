"""Sizing: the mass balance that is recommended, and the published rules beside it."""
