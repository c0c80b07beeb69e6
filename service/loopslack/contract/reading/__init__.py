"""From a question to a loop in SI: every default filled in and noted, every contradiction found."""
