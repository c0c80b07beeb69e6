"""The operations that answer many designs at once, for the register in `v1`."""

from typing import Any

from loopslack.api.many import NDJSON, respond_to_batch, respond_to_stream
from loopslack.api.operations import BodySize, Operation
from loopslack.contract.answers.many import LoopDesignBatchAnswer
from loopslack.contract.questions.many import LoopDesignBatchQuestion

MANY_OPERATIONS: tuple[Operation[Any, Any], ...] = (
    Operation(
        operation_id="designLoops",
        path="/v1/loop-design/batch",
        tag="Design",
        summary="Design up to 1,000 loops",
        description=(
            "Each design is answered on its own, in the order asked, under the caller's `id`: with its answer, or with "
            "the problem that stands in the way, while the others go on. An `id` that was used before in the batch is "
            "such a problem. Members a design leaves out are taken from `defaults`; a member it states replaces the "
            "default as a whole. Designs without a `vessel` choose from `stock`. Remedies are left out unless "
            "`include` asks for them.\n\n"
            "The answer is sent while it is computed and always complete: designs that could not be reached in the "
            "time allowed carry the problem `deadline-passed`. A fault of `stock`, of `defaults` or of the batch "
            "itself refuses the batch. Nothing is stored; retry freely."
        ),
        question=LoopDesignBatchQuestion,
        answer=LoopDesignBatchAnswer,
        respond=respond_to_batch,
        body_size=BodySize.BATCH,
        problems=("deadline-passed",),
    ),
    Operation(
        operation_id="streamLoopDesigns",
        path="/v1/loop-design/stream",
        tag="Bulk",
        summary="Design loops line by line",
        description=(
            "For tens of thousands of designs: one JSON object a line, in and out (`application/x-ndjson`). The first "
            "line is an object with `stock` and `defaults`, both optional; every further line is a design as in a "
            "batch. Each is answered by one line with the members of a batch's entry, in the order asked; blank lines "
            "are passed over.\n\n"
            "The last line has `complete`, a `summary` of the outcomes and, where the stream ends before its lines "
            "do, the `problem`. A stream without it broke off on its way: send what is left again. Answers start "
            "when the whole body has arrived, so that a client may send all before it reads; one that stops reading "
            "or leaves ends the work. A line may have 256 kB, the first one as much as a single question."
        ),
        respond=respond_to_stream,
        media_type=NDJSON,
        body_size=BodySize.STREAM,
        problems=("deadline-passed",),
    ),
)
"""Batch and stream."""
