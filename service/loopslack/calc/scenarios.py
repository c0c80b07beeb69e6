"""The base case and the doubts about it: what may be worse than stated, one at a time and all at once."""

from msgspec import Struct

from loopslack.calc.model import Loop


class Scenario(Struct, frozen=True, kw_only=True):
    """One reading of a loop in stagnation.

    ``gas_follows``: gas and liquid of the vessel at the mixed temperature instead of the room's;
    ``stagnation_shift``: kelvin added to every stagnation temperature; ``worse_emptying``: the next worse emptying
    class; ``closed_unknown``: branches whose steam access nobody stated are closed.
    """

    id: str
    gas_follows: bool = False
    stagnation_shift: float = 0.0
    worse_emptying: bool = False
    closed_unknown: bool = False

    @property
    def steam_key(self) -> tuple[float, bool, bool]:
        """What decides the steam: scenarios with the same key differ in the vessel only."""
        return self.stagnation_shift, self.worse_emptying, self.closed_unknown


BASE = Scenario(id="base")

# Order of the doubts in every answer.
DOUBT_IDS = ("warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch")
COMBINED_ID = "all-doubts"


def single_doubts(loop: Loop) -> dict[str, Scenario | None]:
    """Each doubt of the loop by id; None where it does not apply."""
    worse = any(group.worse_steam_power is not None for group in loop.groups)
    unknown = any(branch.access == "unknown" for branch in loop.branches)
    return {
        "warm-gas": Scenario(id="warm-gas", gas_follows=True),
        "hotter-stagnation": Scenario(
            id="hotter-stagnation", stagnation_shift=loop.criteria.stagnation_doubt
        ),
        "worse-emptying": Scenario(id="worse-emptying", worse_emptying=True) if worse else None,
        "closed-branch": Scenario(id="closed-branch", closed_unknown=True) if unknown else None,
    }


def all_doubts(loop: Loop) -> Scenario:
    """Every doubt that applies, at once."""
    doubts = single_doubts(loop)
    return Scenario(
        id=COMBINED_ID,
        gas_follows=True,
        stagnation_shift=loop.criteria.stagnation_doubt,
        worse_emptying=doubts["worse-emptying"] is not None,
        closed_unknown=doubts["closed-branch"] is not None,
    )
