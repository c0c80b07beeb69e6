"""What to know about this loop, gravest first, and what is still to be confirmed."""

from loopslack.contract.answers.loop import Provisional
from loopslack.contract.answers.shared import Advisory, Check
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Bullets, Notice, Section, Text
from loopslack.sheet.sections.names import member_name, state_name, subject_name
from loopslack.sheet.words import plain

MOST_CONFIRM = 40
MOST_NOTICES = 60


def notices(case: Case) -> Section | None:
    """Advisories as the sheet words them, from their code and their numbers."""
    words = case.words
    told = tuple(
        Notice(advisory.severity, words(f"severity.{advisory.severity}"), *_worded(case, advisory))
        for advisory in case.answer.advisories[:MOST_NOTICES]
    )
    blocks: list[Notice | Text | Bullets] = list(told)
    more = len(case.answer.advisories) - len(told)
    if more:
        blocks.append(Text(words("notices.more", number=more), "lead"))
    confirm = case.result.to_confirm
    if confirm:
        blocks.append(Text(words("notices.confirm"), "lead"))
        items = [_confirm(case, one) for one in confirm[:MOST_CONFIRM]]
        if len(confirm) > MOST_CONFIRM:
            items.append(words("notices.more", number=len(confirm) - MOST_CONFIRM))
        blocks.append(Bullets(tuple(items)))
    if not blocks:
        return None
    return Section("notices", words("section.notices"), tuple(blocks))


def _worded(case: Case, advisory: Advisory) -> tuple[str, str]:
    """Message and remedy: our own sentence where there is one, that of the answer where not."""
    words = case.words
    numbers = {name: case.say(quantity) for name, quantity in advisory.parameters.items()}
    numbers["subject"] = "" if advisory.subject is None else subject_name(case, advisory.subject)
    check = _check_of(case, advisory)
    remedy = words.or_else(f"advisory.{advisory.code}.remedy", plain(advisory.remedy))
    if advisory.code == "membrane-temperature" and _cooled(case):
        remedy = words("notices.larger-cooling-vessel")
    if check is None:
        return _plain_worded(case, advisory, numbers), remedy
    key = f"advisory.{advisory.code}.message"
    if check.value is None or f"failing.{check.reason}" in words:
        key = f"failing.{check.reason}"
    if key not in words:
        return plain(advisory.message), plain(advisory.remedy)
    return f"{state_name(case, check.scenario)}: {words(key, **numbers)}", remedy


def _cooled(case: Case) -> bool:
    """Whether a cooling vessel stands before the vessel already."""
    sized = case.vessel is not None and case.vessel.cooling_vessel is not None
    return sized or any(part.kind == "cooling-vessel" for part in case.result.content.parts)


def _plain_worded(case: Case, advisory: Advisory, numbers: dict[str, str]) -> str:
    key = f"advisory.{advisory.code}.message"
    if key not in case.words:
        return plain(advisory.message)
    if advisory.code == "not-assessed":
        numbers["state"] = state_name(case, advisory.subject or "")
        numbers["reason"] = case.phrase(plain(advisory.message.partition(": not computed. ")[2]))
    if advisory.code == "soft-solder":
        numbers["runs"] = plain(advisory.message.partition(" joints in ")[2].rstrip("."))
    return case.words(key, **numbers)


def _check_of(case: Case, advisory: Advisory) -> Check | None:
    """The failing check an advisory speaks of."""
    about = (advisory.code, advisory.scenario, advisory.subject)
    for check in case.result.checks:
        if check.verdict == "does-not-hold" and (check.code, check.scenario, check.subject) == about:
            return check
    return None


def _confirm(case: Case, one: Provisional) -> str:
    """One open point: what is open, and which number would settle it."""
    words = case.words
    what = words.or_else(f"confirm.{one.code}", words.or_else(f"check.{one.code}", plain(one.code)))
    if one.field and f"check.{one.code}" in words:
        return words("notices.not-stated", what=what, field=member_name(case, one.field))
    if one.field:
        return f"{what}: {member_name(case, one.field)}"
    if one.subject is None:
        return what
    reason = words.or_else(f"reason.{one.subject}", "")
    return f"{what}: {reason or subject_name(case, one.subject)}"
