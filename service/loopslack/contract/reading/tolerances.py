"""Reads how far inputs may be off either way, in SI; None where the caller says nothing."""

from typing import NamedTuple

from loopslack.contract.questions.criteria import Tolerances as Asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.reading.reader import Reader
from loopslack.kernel.errors import NotApplicable

_FIELDS = {name: field_of(Asked, name) for name in Asked.__struct_fields__}


class Tolerances(NamedTuple):
    """Shares of one, K, m and Pa, each either way."""

    pipe_length: float | None = None
    collector_content: float | None = None
    insulation_conductivity: float | None = None
    steam_power: float | None = None
    stagnation_temperature: float | None = None
    static_height: float | None = None
    fill_pressure: float | None = None
    precharge: float | None = None


def read_tolerances(reader: Reader, stated: Asked | None) -> Tolerances:
    """Read the tolerances of a question."""
    if stated is None:
        return Tolerances()
    place = "/tolerances"
    found = Tolerances(
        reader.optional(stated.pipe_length, _FIELDS["pipe_length"], place),
        reader.optional(stated.collector_content, _FIELDS["collector_content"], place),
        reader.optional(stated.insulation_conductivity, _FIELDS["insulation_conductivity"], place),
        reader.optional(stated.steam_power, _FIELDS["steam_power"], place),
        reader.optional(stated.stagnation_temperature, _FIELDS["stagnation_temperature"], place),
        reader.optional(stated.static_height, _FIELDS["static_height"], place),
        reader.optional(stated.fill_pressure, _FIELDS["fill_pressure"], place),
        reader.optional(stated.precharge, _FIELDS["precharge"], place),
    )
    for member, share in (
        ("pipeLength", found.pipe_length),
        ("insulationConductivity", found.insulation_conductivity),
    ):
        if share is not None and share >= 1:
            reader.refuse(
                NotApplicable(
                    "Off by 100 percent it may be nought; a pipe without length or conductivity cannot be computed.",
                    remedy="State less than 100 percent.",
                    pointer=f"{place}/{member}",
                    facts={"share": share},
                )
            )
    return found
