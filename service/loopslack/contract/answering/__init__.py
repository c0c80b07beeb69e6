"""From a question to its answer: reads, asks the calculation, writes. One function per operation."""
