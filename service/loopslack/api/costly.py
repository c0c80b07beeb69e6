"""Takes costly questions to the side process: one at a time, few waiting, none beyond a deadline.

Past the deadline the work is ended with its process and the caller is told so; the next question gets a new one.
"""

import asyncio

from loopslack.api.side import Side
from loopslack.api.side_words import Answered, Question, encode, read_costly_reply
from loopslack.contract.refusals import Refused
from loopslack.observability import count_refusal


class Costly:
    """The costly questions of one worker."""

    def __init__(self, side: Side, waiting: int, deadline_seconds: float) -> None:
        self._side = side
        self._places = waiting + 1
        self._taken = 0
        self._deadline_seconds = deadline_seconds

    async def ask(self, operation_id: str, body: bytes) -> Answered:
        """The answer of an operation to a body.

        Raises:
            Refused: what the operation refuses; or 503, because too much waits already or the deadline has passed.
            SideFault: a bug of ours.
            SideLostError: the side process was ended from outside.

        """
        if self._taken >= self._places:
            count_refusal("costly")
            detail = "As many costly questions as may wait are waiting already."
            raise Refused("overloaded", detail, headers={"Retry-After": "2"})
        self._taken += 1
        message = encode(Question(operation_id, body))
        try:
            async with asyncio.timeout(self._deadline_seconds):
                reply = read_costly_reply(await self._side.ask(message, self._deadline_seconds))
        except TimeoutError:
            count_refusal("deadline")
            raise Refused(
                "deadline-passed",
                f"The computation did not end within {self._deadline_seconds:g} s.",
                headers={"Retry-After": "5"},
            ) from None
        finally:
            self._taken -= 1
        if isinstance(reply, Answered):
            return reply
        raise reply.error()
