"""A header that the document promises with an answer is sent with it."""

import json

import pytest
from litestar.testing import TestClient

from contract.asked_examples import EXAMPLES, SETTINGS
from contract.strict_document import DOCUMENT
from loopslack.api.document.examples import ExampleBook
from loopslack.api.v1 import OPERATIONS
from loopslack.app import create_app

BOOK = ExampleBook(EXAMPLES)
PATHS = json.loads(DOCUMENT.read_bytes())["paths"]


@pytest.fixture(scope="module")
def client():
    with TestClient(create_app(SETTINGS)) as found:
        yield found


@pytest.mark.parametrize("operation", OPERATIONS, ids=lambda operation: operation.operation_id)
def test_every_promised_header_is_sent(operation, client):
    entry = BOOK.of(operation.operation_id, 200)[0]
    method = operation.method.lower()
    promised = PATHS[operation.path][method]["responses"]["200"]["headers"]
    form = "ndjson" if operation.operation_id == "streamLoopDesigns" else "json"
    question = EXAMPLES / operation.operation_id / f"{entry.name}.question.{form}"
    body = question.read_bytes() if question.exists() else b""
    media = "application/x-ndjson" if form == "ndjson" else "application/json"
    answer = client.request(
        method, operation.path, content=body, headers={"content-type": media} if body else {}
    )
    assert answer.status_code == 200
    assert promised
    assert {name for name in promised if name not in answer.headers} == set()
