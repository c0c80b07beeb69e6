"""Nominal size of the relief valve by collector area, and the check of a stated size."""

from loopslack.calc.judgement import Check, CheckVerdict
from loopslack.kernel import kinds
from loopslack.library.defaults import default

# Largest collector area (m2) by nominal size (mm), smallest size first.
TABLE: tuple[tuple[int, float], ...] = tuple(
    (size, default(f"relief-area-dn{size}").si) for size in (15, 20, 25, 32, 40)
)


def relief_size(aperture: float) -> int | None:
    """Nominal size (mm) the table gives for a collector area (m2); None beyond it: capacity decides there."""
    return next((size for size, area in TABLE if aperture <= area), None)


def relief_size_check(aperture: float, stated: int | None) -> Check:
    """A stated valve size against the collector area the table allows it; to be confirmed where it cannot be."""
    if stated is None:
        reason = "size-not-stated" if relief_size(aperture) is not None else "outside-table"
        return Check("relief-size", False, "fill", "not-assessed", kinds.AREA, aperture, reason=reason)
    allowed = dict(TABLE).get(stated)
    if allowed is None:
        return Check(
            "relief-size", False, "fill", "not-assessed", kinds.AREA, aperture, reason="outside-table"
        )
    verdict: CheckVerdict = "holds" if aperture <= allowed else "does-not-hold"
    return Check("relief-size", False, "fill", verdict, kinds.AREA, aperture, allowed, allowed - aperture)
