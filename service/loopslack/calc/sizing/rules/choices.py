"""What a sizing rule chooses: what it counts, between which pressures, with how much left in the vessel.

Every published rule, and the mass balance itself, is one set of choices in one formula. That is what lets two rules
be compared by changing one choice at a time. The printed laws stand beside their rules; a test holds the two equal.
"""

from typing import NamedTuple

from loopslack.kernel.errors import OutOfRange


class Choices(NamedTuple):
    """Choices of a rule: volumes m3, pressures Pa absolute, the rest shares of one.

    ``vaporised``: collector liquid that steam pushes out; ``pipe_steam``: pipe liquid that steam pushes out;
    ``expansion``: growth of the liquid; ``reserve`` and ``reserve_share``: liquid kept in the vessel, as a volume
    and as a share of the vessel; ``fill``: the fill pressure where the liquid at filling follows from it by
    Boyle's law, None where it does not count; ``least_factor``: a floor under the pressure factor, 1 for none.

    ``gas_ratio``, ``fill_ratio`` and ``density_ratio`` carry the temperatures: gas when hot and when filled over
    the precharge's, liquid density when filled over that in the vessel room; all 1 where a rule knows one
    temperature only.
    """

    vaporised: float
    pipe_steam: float
    final_pressure: float
    precharge: float
    expansion: float
    reserve: float = 0.0
    reserve_share: float = 0.0
    fill: float | None = None
    least_factor: float = 1.0
    gas_ratio: float = 1.0
    fill_ratio: float = 1.0
    density_ratio: float = 1.0

    @property
    def displaced(self) -> float:
        """Everything counted that must find room, m3."""
        return self.vaporised + self.pipe_steam + self.expansion + self.reserve

    @property
    def filled_share(self) -> float:
        """Liquid in the vessel when filled, as a share of the vessel; 0 where it does not count."""
        if self.fill is None:
            return 0.0
        return self.density_ratio * (1 - self.fill_ratio * self.precharge / self.fill)

    @property
    def free_share(self) -> float:
        """Share of the vessel that takes up what is displaced; no vessel does where it is not above 0."""
        taken = min(1 - self.gas_ratio * self.precharge / self.final_pressure, 1 / self.least_factor)
        return taken - self.reserve_share - self.filled_share

    @property
    def factor(self) -> float:
        """Nominal volume per displaced volume."""
        return 1 / self.free_share

    def nominal_volume(self) -> float:
        """Nominal volume, m3. Raises ``OutOfRange`` where the pressures leave no room in any vessel."""
        if not self.free_share > 0:
            raise OutOfRange(
                f"Between {self.precharge / 1e5:.4g} and {self.final_pressure / 1e5:.4g} bar absolute no vessel "
                "takes up liquid.",
                remedy="Lower the precharge or the vessel, or take a relief valve with a higher set pressure.",
                facts={"precharge": self.precharge, "final_pressure": self.final_pressure},
            )
        return self.displaced / self.free_share
