"""The yardstick: the same framework and server, decoding the same questions and encoding answers as long.

It computes nothing: every question is answered with an answer that the service gave beforehand. What lies between
it and the service is what designing costs.
"""

from __future__ import annotations

import os
from pathlib import Path

import msgspec
from litestar import Litestar, Request, Response, get, post

from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.questions.operations import LoopDesignQuestion

DECODER = msgspec.json.Decoder(LoopDesignQuestion)
ENCODER = msgspec.json.Encoder()
ANSWERS = msgspec.json.Decoder(list[LoopDesignAnswer]).decode(Path(os.environ["LOAD_ANSWERS"]).read_bytes())
BODIES = msgspec.json.Decoder(list[str]).decode(Path(os.environ["LOAD_BODIES"]).read_bytes())
BY_BODY = {body.encode(): answer for body, answer in zip(BODIES, ANSWERS, strict=True)}


@post("/v1/loop-design", status_code=200)
async def answer_from_memory(request: Request) -> Response[bytes]:
    """Decode the question, encode the answer that it once got."""
    body = await request.body()
    DECODER.decode(body)
    return Response(ENCODER.encode(BY_BODY[body]), media_type="application/json")


@get("/readyz", sync_to_thread=False)
def ready() -> str:
    """Say that it serves, as the service does."""
    return "pass"


app = Litestar([answer_from_memory, ready], openapi_config=None, logging_config=None)
