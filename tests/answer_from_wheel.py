"""Asks the installed wheel, in process, for its probes and document: all they need must be in it."""

import sys
from pathlib import Path

from litestar.testing import TestClient

import loopslack
from loopslack.app import app

folder = Path(loopslack.__file__).parent
if folder.parent != Path.cwd():
    sys.exit(f"the package was imported from {folder}, not from the wheel")
with TestClient(app) as client:
    for path in ("/livez", "/readyz", "/docs", "/v1/openapi.json", "/v1/openapi.yaml", "/v1/sources"):
        status = client.get(path).status_code
        sys.stdout.write(f"{path} {status}\n")
        if status != 200:
            sys.exit(f"{path} answers {status} from the wheel")
