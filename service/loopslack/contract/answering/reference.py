"""Writes the reference data once, when the service starts."""

from loopslack.calc.sizing.rules.register import RULES
from loopslack.contract.answers import reference as out
from loopslack.contract.writing.quantities import METRIC as WRITE
from loopslack.contract.writing.shared import source_note
from loopslack.library.fluids import PropertyData, fluids
from loopslack.library.sources import sources
from loopslack.library.tubes import tube_standards
from loopslack.library.vessels import preferred_vessels


def list_fluids() -> out.FluidList:
    """List the fluids with what is known of them."""
    return out.FluidList(
        items=[
            out.FluidItem(
                id=entry.id,  # type: ignore[arg-type]  # the table of fluids is closed
                title=entry.title,
                highest_concentration=WRITE.mass_percent(entry.strength_highest),
                properties=[_property(found) for found in entry.properties],
            )
            for entry in fluids()
        ]
    )


def _property(found: PropertyData) -> out.FluidProperty:
    return out.FluidProperty(
        name=found.name,
        form=found.form,
        lowest=None if found.lowest is None else WRITE.temperature(found.lowest),
        highest=None if found.highest is None else WRITE.temperature(found.highest),
        highest_concentration=WRITE.mass_percent(found.strength_highest),
        uncertainty=[
            out.PropertyUncertainty(
                up_to=WRITE.temperature(row.up_to),
                relative=None if row.relative is None else WRITE.ratio(row.relative),
                kelvin=None if row.kelvin is None else WRITE.temperature_difference(row.kelvin),
            )
            for row in found.uncertainty
        ],
        source=source_note(found.source),
        note=found.note or None,
    )


def list_tubes() -> out.TubeList:
    """List the tube standards with their sizes."""
    return out.TubeList(
        items=[
            out.TubeStandardItem(
                id=standard.id,
                title=standard.title,
                material=standard.material,
                note=standard.note or None,
                source=source_note(standard.source),
                sizes=[
                    out.TubeItem(
                        size=tube.size,
                        outer_diameter=WRITE.length(tube.outer_diameter),
                        bore=WRITE.length(tube.bore),
                        content_per_length=WRITE.content_per_length(tube.content),
                        highest_temperature=None
                        if tube.highest_temperature is None
                        else WRITE.temperature(tube.highest_temperature),
                    )
                    for tube in standard.tubes.values()
                ],
            )
            for standard in tube_standards().values()
        ]
    )


def list_rules() -> out.RuleList:
    """List the sizing rules."""
    return out.RuleList(
        items=[
            out.RuleItem(
                id=rule.id,
                title=rule.title,
                counts=rule.counts,
                law=rule.law,
                range=rule.range,
                sources=[source_note(cite) for cite in rule.sources],
            )
            for rule in RULES.values()
        ]
    )


def list_vessel_series() -> out.VesselSeries:
    """List the generic vessel sizes."""
    return out.VesselSeries(
        items=[
            out.VesselSizeItem(
                id=size.id,
                nominal_volume=WRITE.volume(size.nominal_volume),
                source=source_note(size.source),
            )
            for size in preferred_vessels()
        ]
    )


def list_sources() -> out.SourceList:
    """List every publication the service cites."""
    return out.SourceList(
        items=[
            out.SourceItem(
                key=key,
                title=found.title,
                publisher=found.publisher,
                year=found.year,
                seen=found.seen,
                used_for=found.used_for,
            )
            for key, found in sources().items()
        ]
    )
