"""Reads the designs of a batch together with what they share, and what they share by itself."""

from contextlib import suppress

from msgspec import Struct, inspect

from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.many import (
    BatchDesign,
    LoopDesignBatchQuestion,
    LoopDesignDefaults,
    StreamHead,
    lacking,
    merged,
)
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.questions.plant import Site
from loopslack.contract.questions.vessels import FromStock
from loopslack.contract.reading.again import lasting, lies_within, together
from loopslack.contract.reading.reader import EnoughError, Reader
from loopslack.contract.reading.sizing import read_sizing
from loopslack.contract.reading.vessels import read_stock
from loopslack.contract.strict.drafts import stand_in
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import Length
from loopslack.physics.atmosphere import atmospheric_pressure

_MEMBERS = inspect.type_info(LoopDesignQuestion).fields  # type: ignore[attr-defined] # of a struct
_ALTITUDE = field_of(Site, "altitude")
_OF_SEVERAL_MEMBERS = {"contradiction", "missing", "not-applicable"}


class Shared(Struct, frozen=True):
    """What all designs of a batch have in common."""

    defaults: LoopDesignDefaults | None = None
    stock: FromStock | None = None

    def read(self, design: BatchDesign, reader: Reader) -> None:
        """Read a design; what neither it nor the defaults state is refused."""
        reader.take_over(self.faults_beside_missing(design, reader.turn))
        reader.take_over(lacking(merged(design, self.defaults, self.stock)))

    def faults_beside_missing(
        self, design: BatchDesign | LoopDesignDefaults, turn: int
    ) -> list[CalculationError]:
        """What is refused of a design while something stands in for what neither it nor the defaults state."""
        members = merged(design, self.defaults, self.stock)
        places = [error.pointer for error in lacking(members)]
        for member in _MEMBERS:
            pointer = f"/{member.encode_name}"
            if pointer in places:
                members[member.name] = stand_in(member.type, pointer)(turn)
        reader = Reader(turn=turn)
        with suppress(EnoughError):
            read_sizing(LoopDesignQuestion(**members), reader)
        return [error for error in reader.refused if not lies_within(error.pointer, places)]

    def completed(self, design: BatchDesign) -> LoopDesignQuestion:
        """Fill the defaults and the stock into a design.

        Raises ``Refusals`` naming every required member that neither states, and whatever else is found.
        """
        members = merged(design, self.defaults, self.stock)
        if lacking(members):
            raise together(lasting(lambda _: design, self.read))
        return LoopDesignQuestion(**members)


def read_head(head: StreamHead, reader: Reader) -> None:
    """Read what designs share, for the faults that no design can make up for.

    What a design may override or what depends on the altitude of its site is told with the design.
    """
    altitude = reader.stand_in(0.0, _ALTITUDE.low, _ALTITUDE.high)
    own = Reader(atmospheric_pressure(Length(altitude)), turn=reader.turn)
    with suppress(EnoughError):
        read_stock(own, head.stock or (), "/stock")
    if head.stock and head.defaults is not None and head.defaults.vessel is not None:
        own.contradiction(
            "/defaults/vessel",
            "The defaults name a vessel, so that no design would choose from the stock.",
            "Leave one of the two out.",
        )
    reader.take_over(own.refused)
    if head.defaults is not None:
        found = Shared().faults_beside_missing(head.defaults, reader.turn)
        reader.take_over((error for error in found if error.code not in _OF_SEVERAL_MEMBERS), "/defaults")


def read_batch(batch: LoopDesignBatchQuestion, reader: Reader) -> None:
    """Read a whole batch for its faults; the stock once, not with every design.

    What a design lacks is left to its own answer: the defaults may be what is faulty.
    """
    read_head(StreamHead(stock=batch.stock, defaults=batch.defaults), reader)
    shared = Shared(defaults=batch.defaults)
    for place, design in enumerate(batch.designs):
        reader.take_over(shared.faults_beside_missing(design, reader.turn), f"/designs/{place}")
