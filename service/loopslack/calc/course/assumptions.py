"""What the day takes for granted, with numbers and their origin. Wording and figures, no computing.

The residue in the collectors, the share of the absorber it wets and the condensate that runs back decide the
answer, and there is no source for any of them: that is why the answer is an envelope.
"""

from typing import Literal

from msgspec import Struct

from loopslack.kernel.citations import DERIVED, OWN_ASSUMPTION, Cite

EmptyingClass = Literal["good", "fair", "poor"]

RESIDUAL_SHARE: dict[EmptyingClass, float] = {"good": 0.20, "fair": 0.45, "poor": 0.80}
"""Share of the collectors' content that steam cannot push out, by emptying class. No source."""

COLLECTOR_CAPACITY = 8000.0  # J/m2K with liquid
WALL_HEAT = 8930.0 * 385.0  # J/m3K, copper; steel is a tenth more
INSULATION_HEAT = 70.0 * 1500.0  # J/m3K
INSULATION_SHARE = 0.4  # of the insulation's capacity: its outer face stays cool
SURFACE_FACTOR = 5.54  # m2 per m3^(2/3): a cylinder as high as wide; a sphere has 4.84
SURFACE_LOSS = 8.0  # W/m2K of a bare shell to a still room
SURFACE_HEAT = 7200.0  # J/m2K, two millimetres of steel
STATION_HEAT = 4000.0  # J/K
STATION_LOSS = 2.0  # W/K
VALVE_AREA = 3.3e-5  # m2, effective, of a valve of nominal size 15 mm; grows with the square of the size


class Assumption(Struct, frozen=True, kw_only=True):
    """One thing taken for granted: a stable id, the sentence for the reader, and its source."""

    id: str
    text: str
    source: Cite


def own(id: str, text: str) -> Assumption:
    """Assumption nobody has published."""
    return Assumption(id=id, text=text, source=OWN_ASSUMPTION)


def derived(id: str, text: str) -> Assumption:
    """Simplification that follows from how the model is built."""
    return Assumption(id=id, text=text, source=DERIVED)


STANDING = (
    own(
        "residue",
        "Steam cannot push out a share of the collectors' content: 20 % where they empty well, 45 % fairly, "
        "80 % poorly. This share is an assumption without a source; it decides how far steam reaches.",
    ),
    own(
        "wetted-share",
        "The liquid left wets the share of the absorber that it fills; only that share makes steam. This is "
        "an assumption without a source.",
    ),
    own(
        "reflux",
        "No condensate runs back into the collectors in the one curve, as where pipes fall away from them; "
        "the envelope also takes all of it. This is an assumption without a source.",
    ),
    own(
        "collector-capacity",
        "Collectors hold 8 kJ/m2K with their liquid; 6 to 12 kJ/m2K moves the largest steam volume by 0.1 %.",
    ),
    own(
        "pipe-capacity",
        "Tube walls count as copper (8930 kg/m3, 385 J/kgK, from memory) and insulation with 0.4 of 70 "
        "kg/m3 and 1500 J/kgK; twice as much takes 2 % off the largest steam volume.",
    ),
    own(
        "shells",
        "The station has 4 kJ/K of metal and loses 2 W/K; vessels lose 8 W/m2K and hold 7.2 kJ/m2K, of a "
        "surface of 5.54 times their volume to the power 2/3.",
    ),
    derived(
        "surroundings",
        "Pipes, station and vessel stand in their stated surroundings all day; only the collectors follow "
        "the ambient of the day.",
    ),
    derived(
        "one-pipe",
        "All branches open to steam count as one pipe that fills from the collectors; its fronts stand at "
        "one elevation. Branches closed to steam are dead content at the station.",
    ),
    derived(
        "no-flow-inside",
        "No inertia, no pressure drop, no heat conduction along pipes; liquid and wall of a stretch of pipe "
        "have one temperature. The sudden collapses of steam at the end are no statement about water "
        "hammer.",
    ),
    derived(
        "design-case",
        "The coupled balance of the stagnation check stays the design case: with the same liquid temperatures it "
        "bounds this course, which is milder because the collectors run out of water. The fluid-data allowance of "
        "a sizing is not counted here.",
    ),
)
"""Said with every answer."""

RESIDUE_STRENGTH = derived(
    "residue-strength",
    "The liquid left loses water only and boils at its own strength; beyond 63 % glycol by mass the boiling point "
    "is extrapolated.",
)
RESIDUE_AS_FILLED = derived(
    "residue-strength",
    "The liquid left boils like the filling however much of it has boiled off: nothing is known of another strength.",
)
