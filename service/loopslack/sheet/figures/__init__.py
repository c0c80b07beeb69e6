"""The figures of a sheet, each a function from a case to a drawing, or to nothing where there are no numbers for it."""
