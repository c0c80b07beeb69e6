"""What a caller must know about a result: codes, numbers, a sentence, and what to do."""
