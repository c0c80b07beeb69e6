"""Inputs of a loop that can be moved one at a time, each over its range. Import from its modules."""
