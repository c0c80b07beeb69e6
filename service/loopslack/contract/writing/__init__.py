"""From a result in SI to an answer: in the caller's units, rounded once."""
