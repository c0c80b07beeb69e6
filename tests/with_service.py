"""Runs a command while the service is served: `python tests/with_service.py COMMAND...`.

The word URL among the command's arguments becomes the address. The exit code is the command's.
"""

import os
import subprocess
import sys
import tempfile
from pathlib import Path

from faults.server import serving

PATIENT = {
    "LOOPSLACK_ACCESS_LOG": "false",
    "LOOPSLACK_SHED_LAG_SECONDS": "10",
    "LOOPSLACK_DEADLINE_SECONDS": "120",
}
"""A command that checks what is answered must not be refused because the machine is busy with other tests."""


def main(command: list[str]) -> int:
    """Serve, run the command, stop; show the end of the server's log if the command fails."""
    with (
        tempfile.TemporaryDirectory() as folder,
        serving(Path(folder), workers=2, environment=PATIENT) as server,
    ):
        url = f"http://127.0.0.1:{server.port}"
        words = [url if word == "URL" else word for word in command]
        status = subprocess.run(words, check=False, env=dict(os.environ, LOOPSLACK_URL=url)).returncode
        if status:
            sys.stdout.write(
                f"exit code {status}; the end of the server's log:\n{server.log.read_text()[-4000:]}\n"
            )
        return status


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
