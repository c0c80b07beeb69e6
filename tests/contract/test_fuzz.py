"""A small fuzzing run in this process; the long one against a live service is `fuzz_live.sh`."""

import json
from pathlib import Path
from typing import Any

import schemathesis
from hypothesis import HealthCheck, settings

from contract.asked_examples import SETTINGS
from contract.strict_document import DOCUMENT, strict
from loopslack.app import create_app

CONFIG = schemathesis.Config.from_path(Path(__file__).parent / "schemathesis.toml")
CONFIG.projects.default.phases.coverage.enabled = False  # thousands of cases, for the long run
schema = schemathesis.openapi.from_dict(strict(json.loads(DOCUMENT.read_bytes())), config=CONFIG)
SERVICE = create_app(SETTINGS)


async def standing(scope: Any, receive: Any, send: Any) -> None:
    """The service without start and stop, which the fuzzer would ask for anew with every question."""
    if scope["type"] != "lifespan":
        # The process has one readiness, which other tests that start and stop a service leave as stopping.
        SERVICE.readiness.loaded, SERVICE.readiness.draining = True, False
        await SERVICE(scope, receive, send)
        return
    while True:
        message = await receive()
        await send({"type": f"{message['type']}.complete"})
        if message["type"] == "lifespan.shutdown":
            return


schema.app = standing


@schema.parametrize()
@settings(max_examples=10, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
def test_any_question_gets_what_the_document_says(case: Any) -> None:
    case.call_and_validate()
