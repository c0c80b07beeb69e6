"""Published laws as plain functions on SI floats, each with its papers. Knows no loop, no table, no framework."""
