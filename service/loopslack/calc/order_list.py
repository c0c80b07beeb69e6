"""What to order: glycol and water or ready mix, the relief valve's size, the discharge container, the category.

Volumes of glycol and water are those before mixing at 20 degC, as they are sold.
"""

from typing import Literal, NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit
from loopslack.calc.relief_size import relief_size
from loopslack.kernel.kinds import GaugePressure, NominalVolume
from loopslack.library.defaults import default
from loopslack.library.fluids import water_data
from loopslack.physics.vessel import pressure_volume_product

Category = Literal["sound-engineering-practice", "i", "ii", "iii", "iv"]

ROOM = 293.15  # K, the temperature at which the unmixed volumes hold
_LIMITS: tuple[tuple[Category, float], ...] = (
    ("sound-engineering-practice", default("pressure-equipment-sound-engineering-practice").si),
    ("i", default("pressure-equipment-category-i").si),
    ("ii", default("pressure-equipment-category-ii").si),
    ("iii", default("pressure-equipment-category-iii").si),
)


class OrderList(NamedTuple):
    """Volumes m3; glycol and water are None for a caller's own fluid, which is ordered ready mixed.

    ``category`` is None where the vessel's rated pressure was not stated.
    """

    content: float
    vessel_content: float
    filling_loss: float
    glycol: float | None
    water: float | None
    ready_mix: float
    mass_fraction: float
    volume_fraction: float
    freezing_point: float
    freezing_margin: float
    ice_fraction: float | None
    relief_size: int | None
    discharge_container: float
    category: Category | None


def order_list(fitted: Fit) -> OrderList:
    """The order list of a design, for the loop filled as recommended."""
    analysis = fitted.analysis
    loop, fluid = analysis.loop, analysis.fluid
    loss = default("filling-loss").si
    mass = (analysis.states.fill.vessel_density * loop.content + max(fitted.mass, 0.0)) * (1 + loss)
    glycol = water = None
    if fluid.kind != "own":
        water = mass * (1 - fluid.mass_fraction) / water_data().density_at_20
        glycol = water * fluid.volume_fraction / (1 - fluid.volume_fraction)
    minimum = loop.temperatures.site_minimum
    return OrderList(
        loop.content,
        max(fitted.mass, 0.0) / analysis.states.fill.vessel_density,
        loss,
        glycol,
        water,
        mass / fluid.density(ROOM),
        fluid.mass_fraction,
        fluid.volume_fraction,
        fluid.freezing_point,
        minimum - fluid.freezing_point,
        _ice(analysis, minimum),
        loop.relief.nominal_size or relief_size(loop.aperture),
        loop.collector_content,
        _category(fitted),
    )


def _ice(analysis: Analysis, minimum: float) -> float | None:
    """Ice share at the site minimum; None where it does not freeze or no curve is known."""
    fluid = analysis.fluid
    if minimum >= fluid.freezing_point or fluid.kind in ("own", "water"):
        return None
    return fluid.ice_fraction(minimum)


def _category(fitted: Fit) -> Category | None:
    """Category of one vessel with a gas cushion, fluid group 2."""
    rated = fitted.vessel.rated_pressure
    if rated is None:
        return None
    product = pressure_volume_product(GaugePressure(rated), NominalVolume(fitted.vessel.nominal_volume))
    return next((category for category, limit in _LIMITS if product <= limit), "iv")
