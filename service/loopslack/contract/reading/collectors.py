"""Reads collectors: every area on the aperture, every figure for the whole group."""

from loopslack.calc.model import CollectorGroup, Sun
from loopslack.contract.questions import collectors as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.reading.heat import no_area, read_coefficients, read_stagnation, read_steam_power
from loopslack.contract.reading.reader import Reader
from loopslack.kernel import kinds
from loopslack.library.defaults import default

_GROUP = asked.CollectorGroup
_AREA = field_of(_GROUP, "area")
_AREAS = {
    "aperture": field_of(_GROUP, "aperture_area"),
    "gross": field_of(_GROUP, "gross_area"),
    "absorber": field_of(_GROUP, "absorber_area"),
}
_CONTENT = field_of(_GROUP, "content")
_HEIGHT = field_of(_GROUP, "height")

_SAME_AREA = 1e-3
_REASON = "Steam power counts per aperture area"


def read_group(
    reader: Reader,
    group: asked.CollectorGroup,
    place: str,
    *,
    name: str,
    sun: Sun,
    static_height: float,
    space: int,
) -> CollectorGroup:
    """Read one group; all figures come out for the whole group on the aperture."""
    areas = read_areas(reader, group, place)
    aperture = areas["aperture"]
    efficiency, linear, quadratic = read_coefficients(reader, group, place, areas)
    emptying, power, worse = read_steam_power(reader, group, place)
    height = reader.optional(group.height, _HEIGHT, place)
    return CollectorGroup(
        name=name,
        build=group.type,
        count=group.count,
        aperture=group.count * aperture,
        content=group.count * read_content(reader, group, place, aperture),
        peak_efficiency=efficiency,
        linear_loss=linear,
        quadratic_loss=quadratic,
        stagnation_temperature=read_stagnation(reader, group, place, sun, (efficiency, linear, quadratic)),
        measured_stagnation=group.measured_stagnation is not None,
        emptying=emptying,
        steam_power=power,
        worse_steam_power=worse,
        height=static_height if height is None else height,
        space=space,
    )


def read_content(reader: Reader, group: asked.CollectorGroup, place: str, aperture: float) -> float:
    """Content of one collector, m3; by type and aperture if not stated."""
    if group.content is not None:
        return reader.si(group.content, _CONTENT, place)
    row = default(f"collector-content-{group.type}")
    why = f"{row.why} For {aperture:.4g} m2 of aperture each."
    low, high = row.low * aperture, row.high * aperture
    return reader.derived(f"{place}/content", row.si * aperture, kinds.VOLUME, why, low=low, high=high)


def read_areas(reader: Reader, group: asked.CollectorGroup, place: str) -> dict[str, float]:
    """Find the stated areas of one collector, m2, by basis; the aperture is always among them."""
    area = reader.si(group.area, _AREA, place)
    areas: dict[str, float] = {group.area_basis: area}
    if group.aperture_area is None and group.gross_area is None and group.absorber_area is None:
        if group.area_basis != "aperture":
            no_area(reader, "aperture", f"{place}/apertureArea", _REASON)
            areas["aperture"] = reader.stand_in(area, 0.9 * area)
        return areas
    stated = {"aperture": group.aperture_area, "gross": group.gross_area, "absorber": group.absorber_area}
    for basis, quantity in stated.items():
        if quantity is None:
            continue
        number = reader.si(quantity, _AREAS[basis], place)
        if basis == group.area_basis and abs(number - area) > _SAME_AREA * area:
            reader.contradiction(
                f"{place}/{basis}Area",
                f"The {basis} area is stated twice, as {area:.5g} and {number:.5g} m2.",
                f"State it once, or correct `areaBasis`, which now says that `area` is the {basis} area.",
            )
        areas.setdefault(basis, number)
    if "aperture" not in areas:
        no_area(reader, "aperture", f"{place}/apertureArea", _REASON)
        areas["aperture"] = reader.stand_in(area, 0.9 * area)
    if areas.get("gross", areas["aperture"]) < areas["aperture"] * (1 - _SAME_AREA):
        reader.contradiction(
            f"{place}/grossArea",
            f"The gross area of {areas['gross']:.5g} m2 is smaller than the aperture of "
            f"{areas['aperture']:.5g} m2.",
            "Exchange the two, or correct the smaller one.",
        )
    return areas
