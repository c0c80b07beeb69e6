"""loopslack: expansion vessel sizing and stagnation of closed, pressurised glycol collector loops."""

__version__ = "1.1.0"
