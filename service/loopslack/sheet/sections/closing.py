"""The end of a sheet: cautions, the author's remark, a place to sign, and what computed it."""

from loopslack.sheet.case import Case
from loopslack.sheet.lines import Blanks, Bullets, Fact, Facts, Section, Text
from loopslack.sheet.words import plain


def cautions(case: Case) -> Section:
    """Dangers every such loop has."""
    words = case.words
    items = tuple(
        case.prose(words.or_else(f"caution.{one.code}", plain(one.message))) for one in case.answer.cautions
    )
    return Section("cautions", words("section.cautions"), (Bullets(items),))


def signing(case: Case, fingerprint: str) -> Section:
    """Place to sign, and the versions and fingerprints with which the sheet can be made again to the byte."""
    words, made = case.words, case.answer.provenance
    facts = (
        Fact(words("fact.service"), plain(made.service_version)),
        Fact(words("fact.contract"), plain(made.contract_version)),
        Fact(words("fact.equations"), plain(made.equations)),
        Fact(words("fact.question"), fingerprint),
    )
    names = ("blank.designed", "blank.checked", "blank.place", "blank.signature")
    return Section(
        "signing",
        words("section.signing"),
        (
            Text(words("signing.sentence")),
            Blanks(tuple(words(name) for name in names)),
            Facts(facts),
            Text(words("signing.again"), "small"),
        ),
        whole=True,
    )
