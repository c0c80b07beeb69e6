"""The PDF: tagged, archival, the same bytes every time, and refused in words where the typesetter is missing."""

import re
import sys
import zlib
from functools import cache

import pytest
from msgspec.structs import replace

from loopslack.sheet import pdf as module
from loopslack.sheet import rendering
from loopslack.sheet.pdf import NotInstalled, pdf, typesetter
from sheet.sheets import NAMES, asked, sheet

pytestmark = pytest.mark.apart


@cache
def wash_house() -> bytes:
    return pdf(sheet("wash-house"))


def objects(file: bytes) -> bytes:
    """The file with its streams unpacked, to look for names in."""
    found = [file]
    for stream in re.findall(rb"stream\r?\n(.*?)\r?\nendstream", file, re.DOTALL):
        try:
            found.append(zlib.decompress(stream))
        except zlib.error:
            continue
    return b"\n".join(found)


@pytest.mark.parametrize("name", NAMES)
def test_it_is_set_with_its_own_letters_at_the_first_attempt(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The second attempt, with the plainest letters, is for texts nobody can foresee, not for our own words."""
    tried = []
    original = module._printable
    monkeypatch.setattr(
        module,
        "_printable",
        lambda value, *, strict, drawn=False: (
            tried.append(strict) or original(value, strict=strict, drawn=drawn)
        ),
    )
    assert pdf(sheet(name)).startswith(b"%PDF-1.7")
    assert True not in tried


def test_it_says_that_it_is_tagged_and_archival() -> None:
    assert b"<pdfuaid:part>1</pdfuaid:part>" in wash_house()
    assert b"<pdfaid:part>2</pdfaid:part>" in wash_house()
    assert b"<pdfaid:conformance>A</pdfaid:conformance>" in wash_house()
    unpacked = objects(wash_house())
    assert b"/StructTreeRoot" in unpacked
    assert b"/Marked true" in unpacked
    for tag in (b"/H1", b"/H2", b"/Table", b"/TH", b"/TD", b"/Figure", b"/L", b"/LI"):
        assert tag in unpacked
    assert b"/Lang(en)" in unpacked.replace(b" ", b"")


def test_every_font_is_inside_and_nothing_runs_or_leads_out() -> None:
    unpacked = objects(wash_house())
    assert unpacked.count(b"/FontDescriptor") > 0
    assert b"/FontFile" in unpacked
    for active in (b"/JavaScript", b"/Launch", b"/URI", b"/EmbeddedFile", b"/OpenAction", b"/AA "):
        assert active not in unpacked


def test_the_same_question_gives_the_same_bytes_also_from_a_new_typesetter() -> None:
    assert pdf(sheet("wash-house")) == wash_house()
    pdf(sheet("too-small"))
    assert pdf(sheet("wash-house")) == wash_house()
    typesetter.cache_clear()
    assert pdf(sheet("wash-house")) == wash_house()


def test_the_date_in_the_file_is_the_one_stated() -> None:
    assert b"2026-12-01" in wash_house()
    undated = pdf(replace(sheet("wash-house"), date=""))
    assert b"2026" not in re.findall(rb"<xmp:CreateDate>(.*?)<", undated)[0]


def test_paper_is_the_paper_asked_for() -> None:
    assert b"/MediaBox[0 0 595.27" in objects(wash_house()).replace(b"[ ", b"[")
    assert b"/MediaBox[0 0 612 792]" in objects(pdf(sheet("cabin-us-units"))).replace(b"[ ", b"[")


def test_without_the_typesetter_it_is_refused_in_words_before_anything_is_computed(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    typesetter.cache_clear()
    monkeypatch.setitem(sys.modules, "typst", None)
    monkeypatch.setattr(rendering, "design_loop", None)
    try:
        with pytest.raises(NotInstalled) as refused:
            rendering.sheet_pdf(asked("wash-house").question)
    finally:
        typesetter.cache_clear()
    assert refused.value.code == "not-installed"
    assert "HTML" in refused.value.remedy


def test_a_process_that_has_set_a_sheet_is_not_to_be_forked_for_others() -> None:
    typesetter.cache_clear()
    assert module.too_late_to_fork() == ""
    wash_house.__wrapped__()
    assert "fork before" in module.too_late_to_fork()
