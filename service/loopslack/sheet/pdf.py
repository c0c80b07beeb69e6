"""Sets a sheet as PDF, tagged for screen readers (PDF/UA-1) and fit for an archive (PDF/A-2a).

The typesetter is an extra of the installation. It gets the sheet as data in one input, has no folder to read from
but that of our own template and no packages to fetch, and takes neither the time nor the machine's fonts: the same
sheet gives the same bytes.
"""

import re
from datetime import date
from functools import cache
from importlib.resources import as_file, files
from pathlib import Path
from threading import Lock
from typing import Any, Literal

import msgspec

from loopslack.kernel.errors import CalculationError
from loopslack.sheet.lines import Sheet
from loopslack.sheet.words import REPLACEMENT

_NO_DATE = date(2000, 1, 1)  # a file for the archive must bear a date; it is printed nowhere
_STANDARDS: list[Literal["ua-1", "a-2a"]] = ["ua-1", "a-2a"]
_LONG = re.compile(r"[^\s\u00a0\u200b]{22}")
_REMEMBERED = 11
_NOTHING = b"."
_SOFT_BREAK = "\u200b"
_PANIC = "PanicException"
_LOCK = Lock()  # the typesetter works on one sheet at a time anyway


class NotInstalled(CalculationError):
    """The typesetter is not part of this installation."""

    code = "not-installed"


class _Typesetter:
    """The typesetter with our template, which it is handed anew for every sheet."""

    def __init__(self) -> None:
        try:
            import typst  # noqa: PLC0415 - an extra of the installation
        except ImportError:
            raise NotInstalled(
                "Sheets as PDF are not available in this installation.",
                remedy="Install the service with its extra `sheet`, or ask for the sheet as HTML.",
            ) from None
        with as_file(files("loopslack.sheet").joinpath("assets")) as folder:
            self._template = Path(folder, "sheet.typ").read_bytes()
            nowhere = str(Path(folder, "no-packages"))
            self._engine = typst.Compiler(
                input=self._template,
                root=str(folder),
                ignore_system_fonts=True,
                package_path=nowhere,
                package_cache_path=nowhere,
            )
        self.failure: type[Exception] = typst.TypstError

    def __call__(self, data: object) -> bytes:
        """Data set by the template. Raises ``failure`` for what the template cannot set."""
        try:
            made = self._set(data)
        finally:
            self._forget()
        if not isinstance(made, bytes):
            raise TypeError("the typesetter gave no single file")
        return made

    def _forget(self) -> None:
        """Let the typesetter drop what it remembers of a sheet, 25 MB each; nobody will ask for the same again.

        It keeps what was used within its last ten documents: so it is given as many that hold nothing.
        """
        for _ in range(_REMEMBERED):
            self._engine.compile(input=_NOTHING, format="pdf")

    def _set(self, data: object) -> object:
        return self._engine.compile(
            input=self._template,
            format="pdf",
            sys_inputs={"data": msgspec.json.encode(data).decode()},
            pdf_standards=[*_STANDARDS],
            timestamp=0,
        )


@cache
def typesetter() -> _Typesetter:
    """The typesetter, made once. Raises ``NotInstalled`` where it is missing."""
    return _Typesetter()


def too_late_to_fork() -> str:
    """Why this process must not be forked for one that sets sheets, or nothing where it may be.

    The typesetter begins threads with its first sheet. A fork takes none of them along, but all that says they are
    there: the new process would wait for them for good.
    """
    if typesetter.cache_info().currsize:
        return "this process has set a sheet as PDF itself, and one forked from it could not: fork before"
    return ""


def pdf(sheet: Sheet) -> bytes:
    """The whole sheet as PDF. Raises ``NotInstalled`` where the typesetter is missing."""
    typeset = typesetter()
    data = msgspec.to_builtins(sheet)
    stated = date.fromisoformat(sheet.date) if sheet.date else _NO_DATE
    data |= {"year": stated.year, "month": stated.month, "day": stated.day}
    with _LOCK:
        try:
            return typeset(_printable(data, strict=False))
        except BaseException as error:
            if not isinstance(error, typeset.failure) and type(error).__name__ != _PANIC:
                raise
        # A text the typesetter cannot set, whatever letters it has: set with the plainest letters only, by a
        # typesetter that has not seen it.
        typesetter.cache_clear()
        return typesetter()(_printable(data, strict=True))


@cache
def _letters() -> "re.Pattern[str]":
    """Everything the fonts of the typesetter have no letter for."""
    text = files("loopslack.sheet").joinpath("assets", "letters.txt").read_text(encoding="ascii")
    spans = [line.split("-") for line in text.split() if line]
    inside = "".join(f"\\U{int(span[0], 16):08x}-\\U{int(span[-1], 16):08x}" for span in spans)
    return re.compile(f"[^{inside}]")


_PLAIN = re.compile(
    "[^\n -~\u00a0-\u017f\u2013\u2014\u2212\u202f\u2026\u2265\u2713\u2717\u00d7\u2080-\u2089]"
)


def _printable(value: Any, *, strict: bool, drawn: bool = False) -> Any:  # noqa: ANN401 - any JSON value
    """The data with letters nobody can print replaced, and long words allowed to break."""
    if isinstance(value, str):
        pattern = _PLAIN if strict else _letters()
        text = value if value.isascii() else pattern.sub("?" if strict else REPLACEMENT, value)
        return text if drawn else _LONG.sub(lambda found: found[0] + _SOFT_BREAK, text)
    if isinstance(value, dict):
        return {
            name: _printable(one, strict=strict, drawn=name in {"svg", "sign"}) for name, one in value.items()
        }
    if isinstance(value, list | tuple):
        return [_printable(one, strict=strict) for one in value]
    return value
