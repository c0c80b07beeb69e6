"""What the codes of answers and refusals mean, told to a person: checks, reasons, advisories, methods' refusals.

A test reads the code that gives them and holds these tables complete. Must not live here: codes that the
contract tells by itself, which are the closed lists of its document.
"""

CHECKS: dict[str, str] = {
    "relief-valve": "Pressure at the vessel in stagnation against the lowest at which the relief valve may open.",
    "acceptance": "Liquid in the vessel in stagnation against what its membrane accepts.",
    "reserve": "Liquid left in the vessel at the coldest against the reserve asked for.",
    "top-pressure": "Pressure at the highest point when cold against the least that keeps air out.",
    "boiling-at-cut-off": "Pressure at the vessel when the pump is stopped against the least that keeps the top "
    "from boiling.",
    "steam-at-station": "Steam power that is left when every open pipe is full of steam and would reach pump, "
    "exchanger and vessel; beyond what the station is said to take there may be none.",
    "steam-reach": "Length of the pipe run that steam fills furthest against its length. The verdict rests on the "
    "power that is left, not on this.",
    "membrane-temperature": "Temperature of the liquid mixed in the vessel against the limit of its membrane.",
    "glycol-degradation": "Temperature of the hottest liquid in stagnation against the one above which glycol ages "
    "quickly.",
    "construction": "What no vessel can make sound, such as an automatic make-up: it is there or it is not.",
    "freezing": "Freezing point of the fluid against the coldest outdoor temperature less a margin.",
    "fill-window": "Width of the range of fill pressures that keep every check against what an installer can hit. "
    "A filling outside the range fails whatever its width.",
    "part-protected": "Pressure at a part while the relief valve stands at its set pressure against the part's "
    "rating.",
    "part-temperature": "Temperature at which the pump is stopped against the limit stated for a part.",
    "volume-without-boiling": "Nominal volume against that of EN 12977 where the loop relies on its collectors not "
    "boiling, which a computed stagnation temperature alone does not show.",
    "part-rating": "A part without a stated rating: there is nothing to compare, so somebody must.",
    "net-positive-suction": "Pressure at the pump inlet above boiling against the head the pump asks for.",
    "relief-size": "Collector area against the largest for the nominal size of the relief valve.",
}
"""What each check compares."""

REASONS: dict[str, str] = {
    "vessel-empty": "The vessel would be empty, so that there is no pressure to name.",
    "vessel-full": "The vessel would be full, so that there is no pressure to name.",
    "below-vacuum": "The pressure there would lie below vacuum, where the liquid parts.",
    "automatic-make-up": "The loop has an automatic make-up, which thins the glycol unseen.",
    "galvanised-parts": "The loop has galvanised parts, whose zinc glycol dissolves.",
    "no-window": "No fill pressure keeps every check.",
    "fill-outside-window": "The filling lies outside the fill window.",
    "too-close-to-precharge": "The fill window lies too close to the precharge.",
    "rating-not-stated": "No rated pressure was stated for the part, and none is assumed.",
    "head-not-stated": "No suction head was stated for the pump.",
    "size-not-stated": "No nominal size was stated for the relief valve.",
    "outside-table": "The collector area is beyond the published table of sizes; the capacity decides.",
}
"""Why a check fails or is not assessed where no number says so."""

TO_CONFIRM: dict[str, str] = {
    "coefficients-assumed": "The efficiency coefficients of a group of collectors were assumed.",
    "emptying-class-assumed": "How well the collectors empty was assumed.",
    "steam-access-unknown": "Nobody stated whether steam can enter a pipe run.",
    "precharge-not-known": "Nobody stated what the precharge of an existing vessel is or was.",
    "rating-unstated": "A rated pressure was not stated.",
}
"""What, beside checks without a limit, makes a basis provisional."""

ADVISORIES: dict[str, tuple[str, str]] = {
    "not-assessed": ("stop", "A state of stagnation could not be computed, so nothing about it is a pass."),
    "freezes": ("stop", "The fluid freezes above the coldest outdoor temperature."),
    "hot-liquid-arrives": (
        "warning",
        "The liquid that enters the vessel last is hotter than its membrane may get, mixed it is not.",
    ),
    "front-below-vessel": (
        "warning",
        "Steam reaches below the vessel connection and may rise to the membrane.",
    ),
    "soft-solder": ("warning", "Steam reaches joints that were soldered soft."),
    "doubts-left-out": ("warning", "The question asked for no doubts, so the design is favourable only."),
    "not-robust": ("note", "Each doubt alone is survived, all of them at once are not."),
    "no-return-run": ("warning", "No pipe run has the role `return`."),
    "high-site-sun": ("note", "At this altitude the sun can be stronger than the one designed for."),
    "rising-pipe": (
        "note",
        "A pipe run rises away from the collectors; of several states the worst is shown.",
    ),
    "reading-undecided": (
        "warning",
        "Audit: lost liquid and lost gas would both explain what the gauge shows.",
    ),
    "liquid-missing": ("warning", "Audit: liquid is missing from the loop."),
    "liquid-too-much": ("warning", "Audit: the loop holds more liquid than it was filled with."),
    "precharge-lost": ("warning", "Audit: the vessel has lost some of its precharge."),
    "precharge-high": ("warning", "Audit: the precharge is higher than it was set."),
    "vessel-empty": (
        "warning",
        "Audit: the reading lies below the precharge, so there is no liquid in the vessel.",
    ),
    "vessel-too-small": (
        "stop",
        "Audit: no precharge and no filling makes this vessel hold; a larger one would.",
    ),
    "no-vessel-holds": ("stop", "Audit: no vessel makes this loop hold; the loop itself has to change."),
    "precharge-not-known": ("note", "Audit: nobody stated what the precharge is or was, so it was taken."),
}
"""Advisories beside those of failing checks: how grave they are and what they say."""

METHOD_CODES: dict[str, str] = {
    "unknown-tube-standard": "The service has no table of this tube standard.",
    "unknown-tube-size": "The standard has no tube of this nominal size.",
    "unknown-sizing-rule": "There is no sizing rule of this name.",
    "other-physics": "The loop is open or drains back; this service computes closed loops under pressure only.",
    "nothing-to-draw": "The answer has no numbers for the figure asked for.",
    "not-installed": "This installation has no typesetter, so it gives no sheet as PDF; ask for the sheet as HTML.",
    "course-not-applicable": "The day without flow cannot be followed for this loop; the message says why.",
}
"""Codes of `errors` that a method adds to those every operation can give."""

VERDICT_HINTS: dict[str, str] = {
    "holds": "Build it, once what the answer lists to confirm has been confirmed.",
    "favourable-only": "Do not build it on this verdict: one thing that may well be worse than stated breaks it.",
    "does-not-hold": "Do not build it. The answer says what fails, by how much, and what would mend it.",
    "not-assessed": "This is no pass. Something that decides could not be computed; the answer says what.",
}
"""What a verdict means for whoever stands before the roof."""

STATES: dict[str, str] = {"required-doubts": "Over all doubts asked for"}
"""States of a check that are neither one of the loop nor one doubt."""

LIMITS: tuple[str, ...] = (
    "single_body_bytes",
    "batch_body_bytes",
    "stream_body_bytes",
    "line_bytes",
    "batch_designs",
    "stream_designs",
    "stock_items",
    "nesting",
    "body_seconds",
    "deadline_seconds",
    "batch_seconds",
)
"""The settings a caller meets as limits."""

UNIT_SIGNS: dict[str, str] = {
    "degC": "°C",
    "degF": "°F",
    "delta_degF": "°F",
    "m2": "m²",
    "m3": "m³",
    "ft2": "ft²",
    "ft3": "ft³",
    "gal_us": "US gal",
    "gal_uk": "imp gal",
    "W/m2": "W/m²",
    "W/m2K": "W/m²K",
    "W/m2K2": "W/m²K²",
    "kg/m3": "kg/m³",
    "mass-percent": "% by mass",
    "volume-percent": "% by volume",
    "percent": "%",
    "1": "",
}
"""Units as a person writes them; the others stand as they are."""


def shown(value: float, unit: str, digits: int = 4) -> str:
    """A quantity as a person writes it."""
    number = f"{value:.{digits}g}"
    if "e" in number:
        number = f"{value:.{digits}e}" if abs(value) < 1e-4 or abs(value) >= 1e7 else f"{value:.0f}"
    return f"{number.replace('-', '−')} {UNIT_SIGNS.get(unit, unit)}".rstrip()  # noqa: RUF001 - a minus sign
