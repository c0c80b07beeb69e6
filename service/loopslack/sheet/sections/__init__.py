"""The sections of a sheet, each a function from a case to a section, or to nothing where there is nothing to say."""
