"""The operations that answer with a page or a drawing, and their place in the register.

One operation per representation, since generated clients take only the first of several media types. A sheet asks
for everything it shows, so it is computed beside the event loop.
"""

from typing import Any

from loopslack.api.operations import Operation
from loopslack.contract.questions.many import FigureQuestion, SheetQuestion
from loopslack.sheet import rendering

_SHEET = "Sheet"


def _takes_long(question: FigureQuestion) -> bool:
    """Whether a figure needs more than the design itself."""
    return bool(rendering.needed_for(question.figure))


SHEET_OPERATIONS: tuple[Operation[Any, Any], ...] = (
    Operation(
        operation_id="renderSheetHtml",
        path="/v1/calculation-sheet/html",
        tag=_SHEET,
        summary="Set a design as a page",
        description=(
            "Designs the loop and sets the calculation sheet as one HTML file: complete in itself, without scripts, "
            "for the screen and for printing. Texts are printed as they are, never interpreted. The same question "
            "gives the same bytes for the same version of the service. Nothing is stored; retry freely."
        ),
        question=SheetQuestion,
        answer=bytes,
        ask=rendering.sheet_html,
        media_type="text/html",
        costly=True,
    ),
    Operation(
        operation_id="renderSheetPdf",
        path="/v1/calculation-sheet/pdf",
        tag=_SHEET,
        summary="Set a design as a PDF",
        description=(
            "Designs the loop and sets the calculation sheet as PDF: tagged for screen readers (PDF/UA-1), fit for an "
            "archive (PDF/A-2a), with its fonts inside. Letters the fonts have not are printed as a replacement mark. "
            "An installation without the typesetter answers 422, `unanswerable-question`, with the code "
            "`not-installed`; ask it for the sheet as HTML. The same question gives the same bytes for the same "
            "version of the service. Nothing is stored; retry freely."
        ),
        question=SheetQuestion,
        answer=bytes,
        ask=rendering.sheet_pdf,
        media_type="application/pdf",
        costly=True,
    ),
    Operation(
        operation_id="renderFigure",
        path="/v1/calculation-sheet/figure",
        tag=_SHEET,
        summary="Draw one figure of a design",
        description=(
            "Designs the loop and draws one figure of its sheet as SVG, with a title and a description for screen "
            "readers. Answered 422 with the code `nothing-to-draw` where the answer has no numbers for the figure, "
            "such as fill pressures of a vessel without a fill window. Nothing is stored; retry freely."
        ),
        question=FigureQuestion,
        answer=bytes,
        ask=rendering.figure_svg,
        media_type="image/svg+xml",
        costly=_takes_long,
    ),
)
