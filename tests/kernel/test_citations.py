"""A citation names a source, perhaps a place in it, and how far it was seen."""

from loopslack.kernel.citations import Cite


def test_a_citation_reads_like_one() -> None:
    assert str(Cite("iso-2533", "from-memory")) == "iso-2533 (from-memory)"
    assert str(Cite("inail-raccolta-r", "read", "R.3.B 4.2")) == "inail-raccolta-r, R.3.B 4.2 (read)"


def test_citations_compare_and_hash_by_content() -> None:
    assert len({Cite("a", "read"), Cite("a", "read"), Cite("a", "derived"), Cite("a", "read", "p. 1")}) == 3
