"""A small fuzzing run in this process; the long one against a live service is `fuzz_live.sh`."""

import json
from typing import Any

import schemathesis
from hypothesis import HealthCheck, settings

from contract.asked_examples import SETTINGS
from contract.strict_document import DOCUMENT, strict
from loopslack.app import create_app

schema = schemathesis.openapi.from_dict(strict(json.loads(DOCUMENT.read_bytes())))
schema.app = create_app(SETTINGS)


@schema.parametrize()
@settings(max_examples=15, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
def test_any_question_gets_what_the_document_says(case: Any) -> None:
    case.call_and_validate()
