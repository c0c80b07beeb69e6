"""The calculation sheet: an answer as a page to look at, print and sign.

``lines`` says what stands on the sheet, as data and in words of a language; ``page`` sets it as HTML, ``print`` as
PDF. Figures are SVG written here, the same text in both. Numbers come from the answer and nowhere else.
"""
