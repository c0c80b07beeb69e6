"""Writes remedies in the caller's units: sentences, cautions, and the changes of the question they stand for.

The calculation has judged every remedy; nothing is decided here. Sentences say what to do, cautions what to mind.
"""

from collections.abc import Sequence

from loopslack.calc.fit import Fit
from loopslack.calc.model import Loop
from loopslack.calc.remedies.case import Case
from loopslack.calc.remedies.changes import changed
from loopslack.calc.remedies.heat import Emptying
from loopslack.calc.remedies.measure import Found
from loopslack.calc.remedies.pairs import Pair
from loopslack.calc.remedies.robust import RobustCooler as FoundCooler
from loopslack.calc.remedies.seek import Remedies as FoundRemedies
from loopslack.contract.answers import remedies as out
from loopslack.contract.answers.loop import VesselResult
from loopslack.contract.answers.shared import AnyQuantity, Caution
from loopslack.contract.quantity import Pressure
from loopslack.contract.writing.changes import Asked, question_changes
from loopslack.contract.writing.loop import Pressures
from loopslack.contract.writing.loop import vessel as write_vessel
from loopslack.contract.writing.quantities import Writer
from loopslack.contract.writing.remedy_words import CAUTIONS, SENTENCES
from loopslack.contract.writing.shared import any_quantity
from loopslack.kernel import kinds

_SHARES = {"mass-percent": "% by mass", "volume-percent": "% by volume"}


class RemedyWriter:
    """Writes the remedies of one question; ``case`` is what they were sought for."""

    def __init__(self, case: Case, asked: Asked, write: Writer) -> None:
        self.case, self.asked, self.write = case, asked, write
        self.loop: Loop = case.loop
        self.pressure = Pressures(write, self.loop.atmosphere)

    def remedies(self, found: FoundRemedies) -> out.Remedies:
        """Everything that was found."""
        none_found = found.needed and not found.single and found.pair is None
        return out.Remedies(
            single=[self._single(one) for one in found.single],
            pair=None if found.pair is None else self._pair(found.pair),
            to_be_proved=[] if found.emptying is None else [self._emptying(found.emptying)],
            none_found=none_found,
            summary=summary(found) + self._first(found),
            evaluations=found.evaluations,
            complete=found.complete,
        )

    def _first(self, found: FoundRemedies) -> str:
        """That a look comes before any work, where one is offered."""
        offered = (*found.single, *(found.pair or ()))
        look = any(to_be_seen(one, self.loop) for one in offered)
        return " Look where the check valve sits before anything is bought." if look else ""

    def _single(self, found: Found) -> out.Remedy:
        fitted, judgement = found.outcome.fitted, found.outcome.judgement
        step = self._step(found)
        return out.Remedy(
            code=step.code,
            rank=step.rank,
            sentence=step.sentence,
            amount=step.amount,
            present=step.present,
            cautions=step.cautions,
            vessel=self._vessel(fitted),
            fill_pressure=self._fill(fitted, found.case),
            robust=judgement is not None and judgement.robust,
            changes=self._changes([found]),
        )

    def _pair(self, pair: Pair) -> out.RemedyPair:
        last = pair.first
        judgement = last.outcome.judgement
        return out.RemedyPair(
            steps=[self._step(found) for found in pair],
            vessel=self._vessel(last.outcome.fitted),
            fill_pressure=self._fill(last.outcome.fitted, last.case),
            robust=judgement is not None and judgement.robust,
            changes=self._changes([pair.second, pair.first]),
        )

    def _changes(self, found: Sequence[Found]) -> list[out.QuestionChange]:
        every = [change for one in found for change in one.changes]
        after = changed(self.case, every)
        return question_changes(every, self.loop, after.loop, self.asked, self.write.system)

    def _step(self, found: Found) -> out.RemedyStep:
        amount = self._quantity(found.amount, found)
        present = None if not found.present else self._quantity(found.present, found)
        words = {
            "amount": _say(amount),
            "instead": "" if present is None else f" instead of {_say(present)}",
            "article": self._article(found),
            "runs": self._runs(found),
            "parts": self._parts(found),
        }
        key = self._key(found)
        cautions = CAUTIONS.get(key, CAUTIONS.get(found.code, ()))
        return out.RemedyStep(
            code=found.code,
            rank=found.rank,
            sentence=SENTENCES[key].format(**words),
            amount=amount,
            present=present,
            cautions=[Caution(code=code, message=message) for code, message in cautions],
        )

    def _key(self, found: Found) -> str:
        """The code, told apart where one measure is two things to do."""
        if found.code == "stronger-glycol" and self.case.strength == "protect-to":
            return "stronger-glycol-protecting"
        return "open-run-unknown" if to_be_seen(found, self.loop) else found.code

    def _quantity(self, si: float, found: Found) -> AnyQuantity:
        if found.kind is kinds.ABSOLUTE_PRESSURE:
            return any_quantity(si - self.loop.atmosphere, kinds.GAUGE_PRESSURE, self.write.system)
        return any_quantity(si, found.kind, self.write.system)

    def _article(self, found: Found) -> str:
        """The article that was judged."""
        for change in found.changes:
            for vessel in change.vessels:
                size = any_quantity(vessel.nominal_volume, kinds.NOMINAL_VOLUME, self.write.system)
                words = f", such as {'one' if change.pieces == 1 else change.pieces} of {_say(size)}"
                if vessel.rated_pressure is not None:
                    rating = any_quantity(vessel.rated_pressure, kinds.GAUGE_PRESSURE, self.write.system)
                    words += f", rated for {_say(rating)}"
                return words
        return ""

    def _runs(self, found: Found) -> str:
        pipe = {"bare-pipe", "extra-pipe", "steam-access"}
        places = [change.place for change in found.changes if change.id in pipe]
        names = [self.loop.branches[k].name for k in places]
        return " and ".join(dict.fromkeys(names))

    def _parts(self, found: Found) -> str:
        places = [change.place for change in found.changes if change.id == "rated-pressure"]
        names = [self.loop.parts[k].name if k >= 0 else "expansion vessel" for k in places]
        return ", ".join(dict.fromkeys(names))

    def _vessel(self, fitted: Fit | None) -> VesselResult | None:
        if fitted is None or self.case.thinned:
            return None
        return write_vessel(fitted, self.write)

    def _fill(self, fitted: Fit | None, case: Case) -> Pressure | None:
        if fitted is None or self.case.thinned:
            return None
        if case.fill_pressure is not None:
            return self.pressure(case.fill_pressure)
        return self.pressure.optional(fitted.window.recommended)

    def _emptying(self, found: Emptying) -> out.ToBeProved:
        amount, present = self.write.irradiance(found.steam_power), self.write.irradiance(found.present)
        return out.ToBeProved(
            code="better-emptying",
            sentence=(
                f"Collectors that send out no more than {amount.value:.4g} {amount.unit} of steam, where "
                f"{present.value:.4g} {present.unit} are counted, would do. That needs re-piping, and a measurement "
                "to prove it; no verdict rests on it before."
            ),
            amount=amount,
            present=present,
        )


def to_be_seen(found: Found, loop: Loop) -> bool:
    """Whether a measure is, in the first place, a look at a check valve nobody has placed."""
    places = [change.place for change in found.changes if change.id == "steam-access"]
    return found.code == "open-run" and all(loop.branches[k].access == "unknown" for k in places)


def summary(found: FoundRemedies) -> str:
    """The outcome in a sentence."""
    bounded = "" if found.complete else " The search was cut short by its bound of work."
    if not found.needed:
        return "The loop holds as it is; nothing needs to be changed."
    if found.single:
        count = len(found.single)
        does = "measure does" if count == 1 else "measures do"
        return (
            f"{count} {does} by itself.{bounded}"
            if count == 1
            else f"{count} {does}, each by itself.{bounded}"
        )
    if found.pair is not None:
        return f"No single measure does; two together do.{bounded}"
    return (
        "Neither a single measure nor a pair of those looked at makes the loop hold. Change its layout, or "
        f"several things at once.{bounded}"
    )


def robust_cooler(found: FoundCooler, write: Writer) -> out.RobustCooler:
    """The cooler that a design lacks to be robust."""
    power, unspent, volume = write.power(found.power), write.power(found.unspent), write.volume(found.volume)
    return out.RobustCooler(
        power=power,
        unspent_power=unspent,
        nominal_volume=volume,
        sentence=(
            f"With every doubt at once {unspent.value:.4g} {unspent.unit} of steam are left at the station. A "
            f"stagnation cooler of {power.value:.4g} {power.unit} would let a vessel of "
            f"{volume.value:.4g} {volume.unit} or more survive them."
        ),
    )


def _say(quantity: AnyQuantity) -> str:
    return f"{quantity.value:.4g} {_SHARES.get(quantity.unit, quantity.unit)}"
