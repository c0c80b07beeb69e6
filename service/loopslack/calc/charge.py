"""The vessel's side of a balance: how it was charged, what it holds, what it has room for."""

from msgspec import Struct

from loopslack.calc.balance import Balance, Mixing

_MIXED_KELVIN = 1e-10  # what a mixed temperature may be off
_PASSES = 40  # four are usual
_LEAST = 0.01  # share of the precharge below which no vessel pressure is a solution


class Charge(Struct, frozen=True, gc=False):
    """A vessel as it was charged and filled: volumes m3, absolute pressures Pa, temperatures K, mass kg.

    ``filled`` is the liquid it holds when the loop is filled, ``mass`` that liquid's mass.
    """

    nominal: float
    precharge: float
    precharge_temperature: float
    filled: float
    mass: float
    room: float
    allowance: float

    def room_at(self, pressure: float, gas_temperature: float) -> float:
        """Liquid (m3) the vessel has room for at a pressure (Pa) and gas temperature (K), by Boyle's law."""
        least = _LEAST * self.precharge
        # A column that hangs below the vessel can ask for pressures at or below nought, which no gas has: there the
        # law goes on along its tangent, so that a search sees ever less room and not a change of sign.
        inverse = 1.0 / pressure if pressure > least else (2.0 - pressure / least) / least
        squeezed = self.precharge * inverse * gas_temperature / self.precharge_temperature
        return self.nominal * (1.0 - squeezed)

    def pressure_holding(self, liquid: float, gas_temperature: float) -> float:
        """Pressure (Pa) of the vessel holding ``liquid`` m3, infinite once it is full."""
        gas = self.nominal - liquid
        if gas <= 0:
            return float("inf")
        return self.precharge * self.nominal / gas * gas_temperature / self.precharge_temperature


class VesselLaw:
    """What a charged vessel holds and has room for, with the gas at the room's or at the mixed temperature."""

    def __init__(self, balance: Balance, charge: Charge, mix: Mixing, *, gas_follows: bool) -> None:
        self.charge, self.mix, self.gas_follows = charge, mix, gas_follows
        self.fluid = balance.loop.fluid
        self.room_density = self.fluid.density(charge.room)

    def held(self, expelled: float) -> tuple[float, float]:
        """Liquid (m3) in the vessel after the loop pushed out ``expelled`` kg, and the gas temperature (K)."""
        charge = self.charge
        mass = charge.mass + expelled
        liquid = mass / self.room_density + charge.allowance
        if not self.gas_follows:
            return liquid, charge.room
        # The warmer, the more volume, and the more of it hot: substitution, hastened by secants through two passes.
        density, mixed_of, filled = self.fluid.density, self.mix.temperature, charge.filled
        first, second = charge.room, mixed_of(filled, liquid)
        error = second - first
        for _ in range(_PASSES):
            if -_MIXED_KELVIN < error < _MIXED_KELVIN or first == second:
                break
            liquid = mass / density(second) + charge.allowance
            following = mixed_of(filled, liquid) - second
            fall = (error - following) / (second - first)
            step = following / fall if fall > 0 else following
            first, error, second = second, following, second + step
        return mass / density(second) + charge.allowance, second

    def excess(self, pressure: float, expelled: float) -> float:
        """Room left (m3) in the vessel at a pressure (Pa); negative where it must rise further."""
        liquid, gas = self.held(expelled)
        return self.charge.room_at(pressure, gas) - liquid
