"""What callers see: questions, answers, quantities, and the way between them and the calculation."""
