"""Reads JSON into questions strictly: what is accepted is exactly what the document says, every fault is named."""
