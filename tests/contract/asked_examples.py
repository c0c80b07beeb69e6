"""Asks the service the questions of `openapi/examples` and says what it answers, in one process.

`PYTHONPATH=service:tests python -m contract.asked_examples` writes the answers beside the questions; run
`python -m loopslack.api.document` after it. A test compares without writing.
"""

from __future__ import annotations

import json
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from litestar.testing import TestClient

from loopslack.api.document.examples import Example, ExampleBook, cut
from loopslack.api.v1 import OPERATIONS
from loopslack.app import create_app
from loopslack.settings import settings_from

EXAMPLES = Path(__file__).parents[2] / "openapi" / "examples"
# One caller after another on a busy machine is no overload.
SETTINGS = settings_from({"LOOPSLACK_SHED_LAG_SECONDS": "10", "LOOPSLACK_ACCESS_LOG": "false"})
NDJSON = "application/x-ndjson"
REQUEST_ID = "6b1f0c3e-2d8b-4f1a-9a53-0f6c2f0d7a11"


def asked() -> Iterator[tuple[Example, int, Any]]:
    """Each example of an operation there is, with the status and the answer it gets; bytes where it is no JSON."""
    book = ExampleBook(EXAMPLES)
    operations = {operation.operation_id: operation for operation in OPERATIONS}
    with TestClient(create_app(SETTINGS), raise_server_exceptions=False) as client:
        for entry in book.entries:
            operation = operations.get(entry.operation)
            if operation is None:
                continue
            question = book.question(entry)
            headers = {"X-Request-Id": REQUEST_ID}
            if question is not None:
                headers["Content-Type"] = NDJSON if isinstance(question, str) else "application/json"
            content = question.encode() if isinstance(question, str) else json.dumps(question).encode()
            reply = client.request(
                operation.method, operation.path, content=content if question else None, headers=headers
            )
            media_type = reply.headers["content-type"].partition(";")[0]
            if media_type == NDJSON:
                yield entry, reply.status_code, reply.text
            elif media_type.endswith("json"):
                answer = reply.json()
                yield entry, reply.status_code, cut(answer) if entry.shortened else answer
            else:
                yield entry, reply.status_code, reply.content


def main() -> int:
    """Write the answers; 1 if one came with another status than its example says."""
    surprises = 0
    for entry, status, answer in asked():
        if status != entry.status:
            surprises += 1
            sys.stdout.write(
                f"{entry.operation} {entry.name}: {status} instead of {entry.status}: {answer}\n"
            )
        elif not isinstance(answer, bytes):
            lines = isinstance(answer, str)
            path = EXAMPLES / entry.operation / f"{entry.name}.answer.{'ndjson' if lines else 'json'}"
            text = answer if lines else json.dumps(answer, indent=2, ensure_ascii=False) + "\n"
            path.parent.mkdir(exist_ok=True)
            path.write_text(text, encoding="utf-8")
    return int(surprises > 0)


if __name__ == "__main__":
    sys.exit(main())
