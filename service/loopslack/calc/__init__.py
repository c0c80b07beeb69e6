"""The calculation: asks, chooses and judges, on a loop in SI. Knows no HTTP and no caller's units."""
