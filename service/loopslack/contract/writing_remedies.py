"""Writes remedies in the caller's units: sentences, cautions, and the changes of the question they stand for.

The calculation has judged every remedy; nothing is decided here. Sentences say what to do, cautions what to mind.
"""

from collections.abc import Sequence

from loopslack.calc.fit import Fit
from loopslack.calc.model import Loop
from loopslack.calc.remedies.case import Case
from loopslack.calc.remedies.changes import changed
from loopslack.calc.remedies.heat import Emptying
from loopslack.calc.remedies.measure import Found, RemedyCode
from loopslack.calc.remedies.pairs import Pair
from loopslack.calc.remedies.robust import RobustCooler as FoundCooler
from loopslack.calc.remedies.seek import Remedies as FoundRemedies
from loopslack.contract import answers_remedies as out
from loopslack.contract.answers_common import AnyQuantity, Caution
from loopslack.contract.answers_loop import VesselResult
from loopslack.contract.quantity import Pressure
from loopslack.contract.units_out import Writer
from loopslack.contract.writing_changes import Asked, question_changes
from loopslack.contract.writing_common import any_quantity
from loopslack.contract.writing_loop import Pressures
from loopslack.contract.writing_loop import vessel as write_vessel
from loopslack.kernel import kinds

_SENTENCES: dict[RemedyCode, str] = {
    "fill-pressure": "Fill to {amount}{instead}.",
    "precharge": "Set the precharge of the empty vessel to {amount}{instead}.",
    "cut-off": "Let the controller stop the pump at {amount}{instead}.",
    "stronger-glycol": "Use {amount} of glycol{instead}.",
    "vessel": "Take an expansion vessel of at least {amount}{instead}{article}.",
    "cooling-vessel": "Put a cooling vessel of {amount}{instead} before the expansion vessel, uninsulated.",
    "relief-valve": "Take a relief valve with a set pressure of {amount}{instead}.",
    "part-rating": "Take parts rated for {amount}{instead}: {parts}.",
    "stagnation-cooler": "Fit a stagnation cooler at the station that takes {amount} from steam{instead}.",
    "open-run": "Place the check valve so that steam can push liquid down {runs} ({amount}).",
    "bare-pipe": "Leave {amount} of pipe before the station bare, in {runs}.",
    "bare-run": "Take the insulation off {runs} ({amount}).",
    "extra-pipe": "Lay {amount} more pipe before the station, in {runs}.",
}

# Common practice, no source.
_REFILL = ("refill", "The loop must be emptied for it and filled anew, cold and covered.")
_HOT = (
    "hot-surfaces",
    "Bare pipe reaches the temperature of steam: guard it against touch and keep it from what burns.",
)
_LOSS = ("heat-loss", "Bare pipe loses heat in operation too.")
_VALVE = (
    "relief-size",
    "Check the valve's nominal size and its discharge anew; all parts must bear the set pressure.",
)
_CAUTIONS: dict[RemedyCode, tuple[tuple[str, str], ...]] = {
    "fill-pressure": (("fill-covered", "Fill only with the collectors covered or cold."),),
    "precharge": (("empty-vessel", "Set the precharge with the vessel empty of liquid and cold."), _REFILL),
    "cut-off": (("operation", "The pump must still run at the temperatures the store is to reach."),),
    "stronger-glycol": (("viscosity", "A stronger mixture is more viscous: check pump and flow."), _REFILL),
    "vessel": (_REFILL,),
    "cooling-vessel": (("uninsulated", "It stays uninsulated and is entered from the top."), _REFILL),
    "relief-valve": (_VALVE, _REFILL),
    "part-rating": (
        ("data-sheet", "Only a maker's stated rating counts, at the temperature of the place."),
        _REFILL,
    ),
    "stagnation-cooler": (
        (
            "capacity",
            "Its capacity must be stated at the temperature of steam, without flow and on a hot day.",
        ),
        _HOT,
        _REFILL,
    ),
    "open-run": (
        (
            "night-circulation",
            "Without a check valve in its old place the loop may circulate at night: place one elsewhere.",
        ),
        _REFILL,
    ),
    "bare-pipe": (_HOT, _LOSS),
    "bare-run": (_HOT, _LOSS),
    "extra-pipe": (("pump-head", "More pipe costs pump head and heat: check the pump."), _REFILL),
}


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
            summary=summary(found),
            evaluations=found.evaluations,
            complete=found.complete,
        )

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
        return out.RemedyStep(
            code=found.code,
            rank=found.rank,
            sentence=_SENTENCES[found.code].format(**words),
            amount=amount,
            present=present,
            cautions=[Caution(code=code, message=message) for code, message in _CAUTIONS[found.code]],
        )

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
    unit = "% by mass" if quantity.unit == "mass-percent" else quantity.unit
    return f"{quantity.value:.4g} {unit}"
