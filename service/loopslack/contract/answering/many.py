"""Answers many designs, one at a time: what batch, stream, command line and fleet have in common.

Lines come in and lines go out, as bytes. Nothing here knows where they come from, how many run at once or what
time it is; a design is answered in the same way, to the byte, wherever that is done.
"""

from collections import Counter
from collections.abc import Iterable, Mapping
from contextlib import suppress
from functools import lru_cache
from typing import NamedTuple

import msgspec
from msgspec import Struct

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.answers.many import DesignOutcome, DesignProblem, OutcomeSummary, StreamEnd
from loopslack.contract.encoding import encoded
from loopslack.contract.problems import FaultyField
from loopslack.contract.questions.many import BatchDesign, StreamHead
from loopslack.contract.questions.vessels import FromStock
from loopslack.contract.reading.again import lasting, together
from loopslack.contract.reading.many import Shared, read_head
from loopslack.contract.reading.reader import EnoughError, Reader
from loopslack.contract.refusals import Refused, refusal_of, refusal_of_fields
from loopslack.contract.strict.decoding import decode
from loopslack.contract.strict.hints import shown
from loopslack.kernel.errors import CalculationError, Contradiction

REFUSED = "refused"
"""How a design that was not answered is counted, beside the verdicts."""

LONGEST_ID = 64


class Outcome(NamedTuple):
    """A design that was dealt with: its line without line end, and how it is counted.

    ``fault`` is the exception of a bug of ours, for a log; no caller may see it.
    """

    line: bytes
    verdict: str
    advisories: tuple[str, ...] = ()
    fault: Exception | None = None


class Tally:
    """Counts outcomes."""

    def __init__(self, counts: Mapping[str, int] | None = None) -> None:
        self._counts = Counter(counts or {})

    def add(self, verdict: str) -> None:
        """Count one design."""
        self._counts[verdict] += 1

    @property
    def designs(self) -> int:
        """Designs counted so far."""
        return self._counts.total()

    def count(self, verdict: str) -> int:
        """Designs with this verdict, or refused."""
        return self._counts[verdict]

    def summary(self) -> OutcomeSummary:
        """The counts as they are written."""
        return OutcomeSummary(
            designs=self.designs,
            holds=self._counts["holds"],
            favourable_only=self._counts["favourable-only"],
            does_not_hold=self._counts["does-not-hold"],
            not_assessed=self._counts["not-assessed"],
            refused=self._counts[REFUSED],
        )


def read_shared(head: bytes, *, most_stock: int | None = None, nesting: int = 32) -> Shared:
    """What a head of `stock` and `defaults` says, either of which may be absent.

    Raises:
        Refused: with every fault found; pointers start at the head.

    """
    read = decode(head, StreamHead, nesting)
    items = read.stock or []
    if most_stock is not None and len(items) > most_stock:
        message = f"The stock has {len(items)} items; {most_stock} are allowed. Send fewer."
        raise refusal_of_fields([FaultyField(pointer="/stock", code="too-many", message=message)])
    reader = Reader()
    with suppress(EnoughError):
        read_head(read, reader)
    faults = lasting(lambda _: read, read_head) if reader.refused else []
    if faults:
        raise refusal_of(together(faults))
    return Shared(defaults=read.defaults, stock=FromStock(items=items) if items else None)


class _Named(Struct):
    id: str


_named = msgspec.json.Decoder(_Named)


def id_of(design: bytes) -> str | None:
    """The caller's name for a design, also where the rest of it is faulty; None where it has none that will do."""
    try:
        name = _named.decode(design).id
    except (msgspec.DecodeError, RecursionError, UnicodeDecodeError):
        return None
    return name if 0 < len(name) <= LONGEST_ID else None


def answer_design(
    design: bytes, index: int, shared: Shared, *, repeated: bool = False, nesting: int = 32
) -> Outcome:
    """Answer one design of many.

    Nothing is raised: what stands in the way of an answer is told in the line. ``repeated`` says that an earlier
    design has the same name, which the one who sees all of them knows.
    """
    if repeated:
        return refuse_design(design, index, refusal_of(_repetition(id_of(design))))
    try:
        asked = decode(design, BatchDesign, nesting, shared.read)
        answer = design_loop(shared.completed(asked))
        verdict = answer.result.verdict
        line = encoded(DesignOutcome(index=index, id=asked.id, verdict=verdict, answer=answer))
        return Outcome(line, verdict, tuple(advisory.code for advisory in answer.advisories))
    except Refused as refused:
        return refuse_design(design, index, refused)
    except CalculationError as error:
        return refuse_design(design, index, refusal_of(error))
    except Exception as error:  # noqa: BLE001 - a bug met by one design must not take the others with it
        fault = Refused("internal-fault", "A fault of the service, not of the design; it has been logged.")
        return refuse_design(design, index, fault)._replace(fault=error)


def refuse_design(design: bytes, index: int, refused: Refused) -> Outcome:
    """The outcome of a design that is not answered, for a reason found by whoever asked for it."""
    return Outcome(
        encoded(
            DesignOutcome(index=index, id=id_of(design), problem=problem_of(refused.in_order_of(design)))
        ),
        REFUSED,
    )


def problem_of(refused: Refused) -> DesignProblem:
    """A refusal as it is told of one design among many."""
    return DesignProblem(
        type=refused.kind.uri,
        title=refused.kind.title,
        status=refused.kind.status,
        detail=refused.detail,
        errors=refused.faults,
        further_errors=refused.further,
    )


def end_line(tally: Tally, refused: Refused | None = None) -> bytes:
    """The last line of a stream; a refusal says why it ends before its lines do."""
    problem = None if refused is None else problem_of(refused)
    return encoded(StreamEnd(complete=refused is None, summary=tally.summary(), problem=problem))


def answer_lines(
    designs: Iterable[bytes | None], first_index: int, head: bytes, repeated: frozenset[int] = frozenset()
) -> tuple[bytes, dict[str, int]]:
    """Answer a run of lines in one go: their answers as lines, and how many came out how.

    What a process or a machine of a fleet is sent; both arguments and results are plain and small. None stands
    for a line that is longer than allowed; ``repeated`` holds the places, counted within the run, of designs
    whose name was used before.
    """
    shared = _remembered(head)
    lines = []
    tally: Counter[str] = Counter()
    for place, design in enumerate(designs):
        index = first_index + place
        if design is None:
            outcome = refuse_design(b"", index, Refused("body-too-large", "The line is longer than allowed."))
        else:
            outcome = answer_design(design, index, shared, repeated=place in repeated)
        lines.append(outcome.line)
        tally[outcome.verdict] += 1
    return b"".join(line + b"\n" for line in lines), dict(tally)


@lru_cache(maxsize=2)
def _remembered(head: bytes) -> Shared:
    """Read a head once for all runs of lines under it."""
    return read_shared(head)


def _repetition(name: str | None) -> CalculationError:
    return Contradiction(
        f"An earlier design is called {shown(name or '')} as well.",
        remedy="Give every design an id of its own.",
        pointer="/id",
    )
