"""Writes a whole design: verdict, vessel, volumes, selection, settings and order list, in the caller's units."""

from math import isfinite

from loopslack.calc.design import Design
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.order_list import OrderList as Ordered
from loopslack.calc.order_list import order_list
from loopslack.calc.reasons import Reason
from loopslack.calc.selection import Refusal
from loopslack.calc.selection import Selection as Selected
from loopslack.calc.settings_card import settings_card
from loopslack.calc.sizing.volumes import Sized
from loopslack.contract.answers import loop as out
from loopslack.contract.answers.order import OrderList
from loopslack.contract.answers.shared import Basis, Check
from loopslack.contract.reading.loop import Reading
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing.quantities import System, Writer
from loopslack.contract.writing.shared import optional_quantity
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind

_ALTERNATIVES = 20
_SETTLED_BY = {"head-not-stated": "/pump/netPositiveSuction", "size-not-stated": "/reliefValve/nominalSize"}
"""The member that was not stated, by the reason why a check could not be made."""

# Common practice, no source, except where a step says otherwise.
INSTRUCTIONS = (
    "Set the precharge with the vessel empty of liquid and cold, before filling.",
    "Fill and flush only with the collectors covered or cold.",
    "Fill to the pressure of the day's row and note pressure and temperature on the card.",
    "Shut automatic vents at the collectors once the loop is free of air.",
    "Check the precharge every year with the vessel empty of liquid.",
    "Test the fluid after every stagnation.",
)


def to_confirm(reading: Reading, judgement: Judgement) -> list[out.Provisional]:
    """Everything that keeps the basis provisional: unstated members and checks nobody could make."""
    found = [
        out.Provisional(code=entry.code, field=entry.pointer)
        for entry in reading.provisional
        if entry.code != "rating-unstated"
    ]
    unrated: dict[str, list[str]] = {"expansion vessel": ["/vessel/ratedPressure"]}
    for part in reading.loop.parts:
        if part.rated_pressure is None:
            unrated.setdefault(part.name, []).append(part.pointer)
    for check in judgement.to_confirm:
        members = unrated.get(check.subject, [])
        settled_by = members.pop(0) if members else _SETTLED_BY.get(check.reason)
        subject = check.subject or check.reason or None
        found.append(out.Provisional(code=check.code, field=settled_by, subject=subject))
    return found


def basis(confirm: list[out.Provisional]) -> Basis:
    """Firm only where nothing is left to confirm."""
    return "provisional" if confirm else "firm"


def checks(judgement: Judgement, write: Writer, atmosphere: float) -> list[Check]:
    """Every check in order."""
    return [write_loop.check(found, write, atmosphere) for found in judgement.checks]


def volumes(design: Design, write: Writer, pressure: write_loop.Pressures) -> out.Volumes:
    """The three volumes."""
    found = design.volumes
    return out.Volumes(
        base=_sized(found.base, write, pressure),
        recommended=_sized(found.recommended, write, pressure),
        robust=_sized(found.robust, write, pressure),
    )


def _sized(found: Sized | None, write: Writer, pressure: write_loop.Pressures) -> out.SizedVolume | None:
    if found is None:
        return None
    largest = found.interval.largest
    return out.SizedVolume(
        smallest=write.volume(found.smallest),
        largest=write.volume(largest) if isfinite(largest) else None,
        cooling_content=write.volume(found.cooling),
        precharge=pressure(found.interval.precharge),
        floor=write.volume(found.floor) if found.floor > found.interval.smallest else None,
    )


def selection(found: Selected, write: Writer) -> out.Selection:
    """How the vessel was chosen."""
    chosen = 0 if found.chosen is None else 1
    written = _Reasons(write.system)
    return out.Selection(
        ranked_by=found.ranked_by,
        considered=len(found.refused) + len(found.alternatives) + chosen,
        refused=[
            out.RefusedVessel(
                id=refusal.vessel.id,
                pieces=refusal.pieces,
                verdict="does-not-hold",
                reasons=written.of(refusal),
                as_sized=True if refusal.as_sized else None,
            )
            for refusal in found.refused
        ],
        alternatives=[
            out.Alternative(id=offer.vessel.id, pieces=offer.pieces)
            for offer in found.alternatives[:_ALTERNATIVES]
        ],
        alternatives_omitted=max(0, len(found.alternatives) - _ALTERNATIVES),
    )


_DIFFERENCE: dict[Kind, Kind] = {
    kinds.TEMPERATURE: kinds.TEMPERATURE_DIFFERENCE,
    kinds.GAUGE_PRESSURE: kinds.PRESSURE_DIFFERENCE,
}


class _Reasons:
    """Writes reasons, once for all vessels that are refused for the very same ones: a stock list repeats itself."""

    def __init__(self, system: System) -> None:
        self.system = system
        # By identity, since telling two tuples of numbers equal costs as much as writing them; the refusals keep
        # each tuple alive meanwhile.
        self._known: dict[int, list[out.RefusalReason]] = {}

    def of(self, refusal: Refusal) -> list[out.RefusalReason]:
        """The reasons of one refusal."""
        found = self._known.get(id(refusal.reasons))
        if found is None:
            found = [_reason(reason, self.system) for reason in refusal.reasons]
            self._known[id(refusal.reasons)] = found
        return found


def _reason(reason: Reason, system: System) -> out.RefusalReason:
    return out.RefusalReason(
        code=reason.code,
        value=optional_quantity(reason.value, reason.kind, system),
        limit=optional_quantity(reason.limit, reason.kind, system),
        short_by=optional_quantity(reason.short, _DIFFERENCE.get(reason.kind, reason.kind), system),
    )


def settings(
    fitted: Fit, judgement: Judgement, write: Writer, pressure: write_loop.Pressures
) -> out.SettingsCard | None:
    """The settings card; none where there is no window to set anything in."""
    window = write_loop.window(fitted, write, pressure)
    if window is None:
        return None
    card = settings_card(fitted, judgement)
    loop = fitted.analysis.loop
    forms = card.closed_forms
    return out.SettingsCard(
        precharge=pressure(card.precharge),
        precharge_temperature=write.temperature(card.precharge_temperature),
        fill_pressure=pressure(card.window.recommended),
        window=window,
        by_temperature=[
            out.FillRow(
                temperature=write.temperature(row.temperature),
                lower=pressure.optional(row.lower),
                recommended=pressure.optional(row.recommended),
                upper=pressure.optional(row.upper),
                reading=pressure.optional(row.reading),
                omitted=row.omitted or None,  # type: ignore[arg-type]  # closed in settings_card
            )
            for row in card.rows
        ],
        readings=[
            out.GaugeReading(
                state=reading.state,  # type: ignore[arg-type]  # closed in settings_card
                reading=pressure.optional(reading.pressure),
                at_least=True if reading.at_least else None,
            )
            for reading in card.readings
        ],
        gauge_range=None if card.gauge_range is None else write.gauge(card.gauge_range),
        final_pressure=pressure(card.final_pressure),
        relief_set_pressure=write.gauge(loop.relief.set_pressure),
        top_pressure_cold=pressure.optional(card.top_pressure_cold),
        static_height=write.length(loop.top),
        relief_height=write.length(loop.relief.height),
        gauge_height=write.length(loop.gauge_height),
        closed_forms=None
        if forms is None
        else out.ClosedForms(lower=pressure(forms.lower), upper=pressure(forms.upper)),
        instructions=list(INSTRUCTIONS),
    )


def order(fitted: Fit, chosen: out.VesselResult | None, write: Writer) -> OrderList:
    """The order list; without a vessel where none is chosen."""
    found: Ordered = order_list(fitted)
    return OrderList(
        expansion_vessel=chosen,
        content=write.volume(found.content),
        vessel_content=write.volume(found.vessel_content),
        filling_loss=write.ratio(found.filling_loss),
        glycol=None if found.glycol is None else write.volume(found.glycol),
        water=None if found.water is None else write.volume(found.water),
        ready_mix=write.volume(found.ready_mix),
        mass_concentration=write.mass_percent(found.mass_fraction),
        volume_concentration=write.volume_percent(found.volume_fraction),
        freezing_point=write.temperature(found.freezing_point),
        freezing_margin=write.temperature_difference(found.freezing_margin),
        ice_fraction=None if found.ice_fraction is None else write.ratio(found.ice_fraction),
        relief_nominal_size=found.relief_size,
        discharge_container=write.volume(found.discharge_container),
        pressure_equipment_category=found.category,
    )
