"""The words of remedies: what to do, and what to mind with it.

By the code of a measure, or by a longer key where one measure is two things to do. What fills the gaps: writing.
"""

SENTENCES: dict[str, str] = {
    "fill-pressure": "Fill to {amount}{instead}.",
    "precharge": "Set the precharge of the empty vessel to {amount}{instead}.",
    "cut-off": "Let the controller stop the pump at {amount}{instead}.",
    "stronger-glycol": "Use {amount} of glycol{instead}.",
    "stronger-glycol-protecting": "Use a mixture that protects down to {amount}{instead}.",
    "vessel": "Take an expansion vessel of at least {amount}{instead}{article}.",
    "cooling-vessel": "Put a cooling vessel of {amount}{instead} before the expansion vessel, uninsulated.",
    "relief-valve": "Take a relief valve with a set pressure of {amount}{instead}.",
    "part-rating": "Take parts rated for {amount}{instead}: {parts}.",
    "stagnation-cooler": "Fit a stagnation cooler at the station that takes {amount} from steam{instead}.",
    "open-run": "Place the check valve so that steam can push liquid down {runs} ({amount}).",
    "open-run-unknown": (
        "First look where the check valve sits. If steam can push liquid down {runs} ({amount}), state `steamAccess` "
        "`open`: nothing needs to be built. If it cannot, place the check valve so that it can."
    ),
    "bare-pipe": "Leave {amount} of pipe before the station bare, in {runs}.",
    "bare-run": "Take the insulation off {runs} ({amount}).",
    "extra-pipe": "Lay {amount} more pipe before the station, in {runs}.",
}

# Common practice, no source.
_REFILL = ("refill", "The loop must be emptied for it and filled anew, cold and covered.")
_HOT = (
    "hot-surfaces",
    "Bare pipe reaches the temperature of steam: guard it against touch and keep it from what burns.",
)
_LOSS = ("heat-loss", "Bare pipe loses heat in operation too.")
_VALVE = (
    "relief-size",
    "Check the valve's nominal size and its discharge anew; all parts must bear the set pressure.",
)
CAUTIONS: dict[str, tuple[tuple[str, str], ...]] = {
    "fill-pressure": (("fill-covered", "Fill only with the collectors covered or cold."),),
    "precharge": (("empty-vessel", "Set the precharge with the vessel empty of liquid and cold."), _REFILL),
    "cut-off": (("operation", "The pump must still run at the temperatures the store is to reach."),),
    "stronger-glycol": (("viscosity", "A stronger mixture is more viscous: check pump and flow."), _REFILL),
    "vessel": (_REFILL,),
    "cooling-vessel": (("uninsulated", "It stays uninsulated and is entered from the top."), _REFILL),
    "relief-valve": (_VALVE, _REFILL),
    "part-rating": (
        ("data-sheet", "Only a maker's stated rating counts, at the temperature of the place."),
        _REFILL,
    ),
    "stagnation-cooler": (
        (
            "capacity",
            "Its capacity must be stated at the temperature of steam, without flow and on a hot day.",
        ),
        _HOT,
        _REFILL,
    ),
    "open-run": (
        (
            "night-circulation",
            "Without a check valve in its old place the loop may circulate at night: place one elsewhere.",
        ),
        _REFILL,
    ),
    "open-run-unknown": (
        (
            "unseen",
            "No verdict rests on it before somebody has looked and the question states what was seen.",
        ),
        (
            "night-circulation",
            "Without a check valve in its old place the loop may circulate at night: place one elsewhere.",
        ),
    ),
    "bare-pipe": (_HOT, _LOSS),
    "bare-run": (_HOT, _LOSS),
    "extra-pipe": (("pump-head", "More pipe costs pump head and heat: check the pump."), _REFILL),
}
