"""Fluids: what each can answer, in SI floats, and how the one a caller describes is made."""
