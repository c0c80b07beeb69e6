"""The doors of the sheet: from a question to its file, and from an answer that is already there.

``design_loop`` is asked with everything the sheet shows; the day without flow only where the question includes it,
since it costs more than all the rest.
"""

from msgspec.structs import replace

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.questions.criteria import Extra
from loopslack.contract.questions.many import FigureQuestion, SheetQuestion
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.reading.again import within
from loopslack.kernel.errors import CalculationError
from loopslack.sheet.case import Case
from loopslack.sheet.composing import compose
from loopslack.sheet.figures.register import FIGURES
from loopslack.sheet.page import page
from loopslack.sheet.pdf import pdf, typesetter

SHOWN: tuple[Extra, ...] = ("rules", "remedies", "sensitivity", "derivation")
_NEEDED: dict[str, tuple[Extra, ...]] = {
    "rules": ("rules",),
    "walk": ("rules",),
    "sensitivity": ("sensitivity",),
    "day-course": ("course",),
}


def sheet_html(question: SheetQuestion) -> bytes:
    """Design the loop and set the sheet as HTML."""
    return render_html(_answer(asked_in_full(question.design)), question)


def sheet_pdf(question: SheetQuestion) -> bytes:
    """Design the loop and set the sheet as PDF. Raises ``NotInstalled`` where the typesetter is missing."""
    typesetter()
    return render_pdf(_answer(asked_in_full(question.design)), question)


def figure_svg(question: FigureQuestion) -> bytes:
    """Design the loop and draw one figure. Raises ``NothingToDraw`` where the answer has no numbers for it."""
    needed = list(needed_for(question.figure))
    return render_figure(_answer(replace(question.design, include=needed)), question)


def _answer(design: LoopDesignQuestion) -> LoopDesignAnswer:
    """Design a loop; what is refused is pointed at where the question of a sheet has it."""
    try:
        return design_loop(design)
    except CalculationError as error:
        raise within(error, "/design") from None


def needed_for(figure: str) -> tuple[Extra, ...]:
    """The costly parts of an answer that a figure shows."""
    return _NEEDED.get(figure, ())


def render_html(answer: LoopDesignAnswer, question: SheetQuestion) -> bytes:
    """The sheet of an answer as one HTML file."""
    return page(compose(answer, question)).encode()


def render_pdf(answer: LoopDesignAnswer, question: SheetQuestion) -> bytes:
    """The sheet of an answer as PDF. Raises ``NotInstalled`` where the typesetter is missing."""
    return pdf(compose(answer, question))


def render_figure(answer: LoopDesignAnswer, question: FigureQuestion) -> bytes:
    """One figure of an answer as SVG. Raises ``NothingToDraw`` where the answer has no numbers for it."""
    case = Case(answer, question.design, question.language or "en")
    make = FIGURES.get(question.figure)
    drawing = None if make is None else make(case)
    if drawing is None:
        raise case.nothing(question.figure)
    return drawing.svg.encode()


def asked_in_full(design: LoopDesignQuestion) -> LoopDesignQuestion:
    """A design asked with everything the sheet shows, and with what it includes itself."""
    stated = design.include or []
    return replace(design, include=list(dict.fromkeys((*stated, *SHOWN))))
