"""What callers may ask: the structs of every operation's question, with the description and range of each member."""
