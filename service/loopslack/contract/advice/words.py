"""The English sentences of advisories about failing checks: what the check found, and what to do."""

from loopslack.calc.judge import JOINT

# What each failing check means and what to do about it.
FAILING: dict[str, tuple[str, str]] = {
    "relief-valve": (
        "the vessel would reach {value}, above the {limit} at which the relief valve may open",
        "Take a larger vessel, a lower precharge or filling, or a relief valve with a higher set pressure.",
    ),
    "acceptance": (
        "the vessel would have to take {value} of liquid, more than the {limit} its membrane accepts",
        "Take a vessel with a larger acceptance volume.",
    ),
    "reserve": (
        "only {value} of liquid is left in the vessel when cold; the reserve is {limit}",
        "Fill to a higher pressure or take a larger vessel.",
    ),
    "top-pressure": (
        "the highest point would be at {value} when cold, below the {limit} that keeps air out",
        "Fill to a higher pressure or raise the precharge.",
    ),
    "boiling-at-cut-off": (
        "the vessel stands at {value} when the pump cuts off, below the {limit} that keeps the top from boiling",
        "Fill to a higher pressure or lower the pump's cut-off temperature.",
    ),
    "steam-at-station": (
        "{value} of steam power is left when all open pipes are full of steam, and reaches the station",
        "Add a stagnation cooler of that power, more or less insulated pipe, or collectors that empty better.",
    ),
    "membrane-temperature": (
        "liquid mixed to {value} would reach the membrane, whose limit is {limit}",
        "Put a cooling vessel before the expansion vessel.",
    ),
    "steam-reach": (
        "steam fills {value} of {subject}, which is {limit} long",
        "Lengthen the run or take collectors that empty better.",
    ),
    "glycol-degradation": (
        "liquid stands at {value}; glycol degrades above about {limit}",
        "Test the fluid after every stagnation and keep stagnation rare.",
    ),
    "construction": (
        "the loop has {subject}",
        "Remove it: dilution by fresh water costs the frost protection, and glycol attacks zinc.",
    ),
    "freezing": (
        "the fluid freezes at {value}; {limit} is asked for at this site",
        "Use more glycol.",
    ),
    "fill-window": (
        "the fill window is too narrow for an installer: {value} where {limit} is asked for",
        "Fill inside the window where there is one, else take a larger vessel.",
    ),
    "part-protected": (
        "{subject} would see {value} while the relief valve stands at its set pressure, above its rating of {limit}",
        "Take a part rated higher or a relief valve with a lower set pressure.",
    ),
    "part-temperature": (
        "{subject} would see {value} before the pump cuts off, above its limit of {limit}",
        "Take a part for higher temperatures or a lower cut-off temperature.",
    ),
    "volume-without-boiling": (
        "the vessel has {value}; a loop that relies on its collectors not boiling is given at least {limit}",
        "Take a larger vessel, or state measured stagnation temperatures and `acceptWithoutBoiling`.",
    ),
    "net-positive-suction": (
        "the pump inlet has {value} above boiling, less than the {limit} the pump asks for",
        "Fill to a higher pressure or place the pump lower.",
    ),
    "relief-size": (
        "the relief valve's nominal size is too small: {value} of collectors where the table allows {limit}",
        "Take the size of the order list.",
    ),
}
WITHOUT_NUMBER = {
    "vessel-empty": "the vessel would be empty, so the pressure is not defined and the loop may draw air",
    "vessel-full": "the vessel would be full, so the pressure is not defined and the relief valve may open",
    "below-vacuum": "the pressure there would lie below vacuum: the liquid parts, boils and draws air",
    "automatic-make-up": "the loop has an automatic make-up, which dilutes the glycol unseen and hides a leak",
    "galvanised-parts": "the loop has galvanised parts, whose zinc glycol dissolves",
    "no-window": "no fill pressure keeps every check",
    "fill-outside-window": "the filling lies outside the fill window",
    "too-close-to-precharge": "the fill window lies too close to the precharge",
}
STATES = {
    "base": "In stagnation",
    "warm-gas": "In stagnation with warm gas in the vessel",
    "hotter-stagnation": "In stagnation with collectors hotter than computed",
    "worse-emptying": "In stagnation with collectors that empty worse",
    "closed-branch": "In stagnation with the runs of unknown check valves closed to steam",
    "all-doubts": "In stagnation with every doubt at once",
    "cold": "In the cold",
    "cut-off": "At the pump's cut-off",
    "fill": "When filled",
    JOINT: "Over all doubts asked for",
}
