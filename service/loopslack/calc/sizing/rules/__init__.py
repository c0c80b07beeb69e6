"""Published sizing rules, one file per family, and the register of them. Import from its modules."""
