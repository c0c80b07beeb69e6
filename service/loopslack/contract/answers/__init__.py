"""What callers get: the structs of every operation's answer."""
