"""Names and meanings of the words of a vessel audit.

A value that `loopslack.contract` has and this table has not is refused when the document is assembled.
"""

from __future__ import annotations

from loopslack.api.document.vocabulary import NamedValues, named

AUDIT_LISTS: tuple[NamedValues, ...] = (
    named(
        "ReadingReference",
        "What a gauge reading is held against.",
        {"record": "The record of the commissioning", "recommended": "The filling recommended here"},
    ),
    named(
        "PrechargeOrigin",
        "Where the precharge of the reference comes from.",
        {
            "record": "The record of the commissioning",
            "as-delivered": "The precharge the vessel was delivered with",
            "by-rule": "The precharge by rule",
        },
    ),
    named(
        "ReadingVerdict",
        "Which explanation of a reading the evidence bears out.",
        {
            "liquid": "Liquid was lost or added",
            "precharge": "Precharge was lost or added",
            "both": "Both have changed",
            "neither": "Nothing has to be explained",
            "open": "The evidence does not decide",
        },
    ),
    named(
        "Certainty",
        "How sure an explanation is.",
        {
            "shown": "Shown by a measured precharge",
            "likely": "Likely, but not measured",
            "open": "Not decided: a measurement is needed",
        },
    ),
    named(
        "ReadingCause",
        "What can have changed since a loop was filled.",
        {"liquid": "The liquid in the loop", "precharge": "The gas in the vessel"},
    ),
    named(
        "FillingPosition",
        "Where a filling lies in the fill window.",
        {
            "below": "Below its lower bound",
            "inside": "Inside",
            "above": "Above its upper bound",
            "no-window": "There is no window",
        },
    ),
)
