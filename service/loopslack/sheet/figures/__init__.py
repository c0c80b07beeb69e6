"""The figures of a sheet, each a function from a case to a drawing, or to nothing where the answer has no numbers for it."""
