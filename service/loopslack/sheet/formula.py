"""Laws as a printed page writes them: Greek letters, raised and lowered digits, true signs, the language's decimals.

The answer prints laws in plain letters, so that a program can read them; nothing here changes what they say.
"""

import re
from functools import lru_cache

from loopslack.sheet.numerals import MINUS
from loopslack.sheet.words import Words

_GREEK = {"rho": "\N{GREEK SMALL LETTER RHO}", "phi": "φ", "eta": "η", "lambda": "λ", "pi": "π", "mu": "μ"}
_GREEK_WORD = re.compile(rf"(?<![A-Za-z])(?:{'|'.join(_GREEK)})(?![A-Za-z])")
_LOWERED = re.compile(r"(?<=[A-Za-z\u03b1-\u03c9])_(\d+)(?!\w)")
_RAISED = re.compile(r"\^(\d+)(?![\d./])")
_POWER = re.compile(r"(\d)e(-?)(\d+)(?!\w)")
_DECIMAL = re.compile(r"(?<![\w.])(\d+)\.(\d+)")
_HIGH = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
_LOW = str.maketrans("0123456789", "₀₁₂₃₄₅₆₇₈₉")
_SIGNS = (
    (" * ", " · "),
    ("<=", "≤"),
    (">=", "≥"),
    ("sqrt(", "√("),
    (" - ", f" {MINUS} "),
    ("= -", f"= {MINUS}"),
    ("1-", f"1 {MINUS} "),
)
_WORDS = ("if", "else", "where")


def formula(law: str, words: Words) -> str:
    """A law, or a symbol of one, as it is printed in a language."""
    return _printed(law, words.language, tuple(words(f"law.{word}") for word in _WORDS))


@lru_cache(maxsize=2048)
def _printed(law: str, language: str, told: tuple[str, ...]) -> str:
    text = _GREEK_WORD.sub(lambda found: _GREEK[found[0]], law)
    for word, other in zip(_WORDS, told, strict=True):
        text = text.replace(f" {word} ", f" {other} ")
    for plain, sign in _SIGNS:
        text = text.replace(plain, sign)
    text = _LOWERED.sub(lambda found: found[1].translate(_LOW), text)
    text = _RAISED.sub(lambda found: found[1].translate(_HIGH), text)
    text = _POWER.sub(
        lambda found: f"{found[1]} \N{MULTIPLICATION SIGN} 10{(found[2] + found[3]).translate(_HIGH)}", text
    )
    if language == "de":
        text = _DECIMAL.sub(r"\1,\2", text.replace(", ", "; "))
    return text
