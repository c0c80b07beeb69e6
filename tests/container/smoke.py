"""Looks at a running container from outside and inside: how it is locked down, and what it answers.

Called by `run.sh` with the container's name and port. Every fact is one that a deployment relies on.
"""

from __future__ import annotations

import http.client
import json
import subprocess
import sys
import time
from pathlib import Path
from typing import Any

from cyclonedx.schema import SchemaVersion
from cyclonedx.validation.json import JsonStrictValidator

INSIDE = """
import json, os, sys
from importlib.util import find_spec

status = dict(line.split(":", 1) for line in open("/proc/self/status"))
def writable(folder):
    try:
        open(folder + "/probe", "w").close()
    except OSError:
        return False
    os.unlink(folder + "/probe")
    return True
shells = [f"{folder}/{name}" for folder in ("/bin", "/usr/bin", "/usr/sbin") for name in ("sh", "bash", "dash")]
print(json.dumps({
    "user": os.getuid(),
    "group": os.getgid(),
    "effective capabilities": int(status["CapEff"], 16),
    "no new privileges": int(status["NoNewPrivs"]),
    "writable": [folder for folder in ("/", "/etc", sys.prefix, "/usr", "/var", "/home") if writable(folder)],
    "shells": [shell for shell in shells if os.path.exists(shell)],
    "compiled parser": find_spec("gunicorn_h1c") is not None,
    "installer": find_spec("pip") is not None,
}))
"""
EXPECTED = {
    "user": 10001,
    "group": 10001,
    "effective capabilities": 0,
    "no new privileges": 1,
    "writable": [],
    "shells": [],
    "compiled parser": True,
    "installer": False,
}


def podman(*arguments: str) -> str:
    """What a podman command prints; its error is an error here."""
    return subprocess.run(
        ["podman", "--log-level", "fatal", *arguments], check=True, capture_output=True, text=True
    ).stdout


def fetched(port: int, path: str, body: bytes | None = None) -> tuple[int, bytes]:
    """Status and body of one request."""
    connection = http.client.HTTPConnection("127.0.0.1", port, timeout=60)
    connection.request("GET" if body is None else "POST", path, body, {"Content-Type": "application/json"})
    answer = connection.getresponse()
    return answer.status, answer.read()


def wait_until_ready(port: int, seconds: float = 30.0) -> float:
    """Seconds until the service is ready."""
    began = time.monotonic()
    while True:
        try:
            if fetched(port, "/readyz")[0] == 200:
                return time.monotonic() - began
        except OSError:
            pass
        if time.monotonic() - began > seconds:
            sys.exit(f"not ready within {seconds} s")
        time.sleep(0.05)


def expect(what: str, found: Any, wanted: Any) -> None:
    """Print a fact; end the run if it is not the wanted one."""
    sys.stdout.write(f"{what}: {found}\n")
    if found != wanted:
        sys.exit(f"{what} should be {wanted}")


def main(name: str, port: int) -> None:
    """Everything in order of cost."""
    sys.stdout.write(f"ready after {wait_until_ready(port):.1f} s\n")
    for what, found in json.loads(podman("exec", name, "python", "-c", INSIDE)).items():
        expect(what, found, EXPECTED[what])
    podman("healthcheck", "run", name)
    bill = podman(
        "exec", name, "python", "-c", "print(open('/usr/share/loopslack/bill-of-materials.cdx.json').read())"
    )
    expect(
        "faults in the bill of materials", JsonStrictValidator(SchemaVersion.V1_6).validate_str(bill), None
    )
    parts = [part["purl"] for part in json.loads(bill)["components"]]
    sys.stdout.write(f"the bill of materials lists {len(parts)} parts\n")
    for wanted in ("pkg:pypi/litestar@", "pkg:deb/debian/libc6@"):
        expect(f"lists {wanted}", any(part.startswith(wanted) for part in parts), True)
    labels = json.loads(podman("inspect", "--format", "{{json .Config.Labels}}", name))
    expect("licence label", labels["org.opencontainers.image.licenses"], "MIT")

    for path in ("/livez", "/docs", "/v1/openapi.json", "/v1/tubes", "/metrics"):
        expect(path, fetched(port, path)[0], 200)
    status, document = fetched(port, "/v1/openapi.json")
    expect("serves the committed document", document == Path("openapi/v1.json").read_bytes(), True)
    for question, answer, shortened in examples("designLoop"):
        status, body = fetched(port, "/v1/loop-design", question.read_bytes())
        expect(question.name, status, 200)
        told, committed = json.loads(body)["result"], json.loads(answer.read_bytes())["result"]
        same = begins_as(told, committed) if shortened else told == committed
        expect(f"{question.name} as on the developer's machine", same, True)
    design = json.loads(Path("openapi/examples/loop-design.json").read_bytes())
    for path, question in (
        ("/v1/calculation-sheet/pdf", {"design": design}),
        ("/v1/loop-design/batch", {"designs": [{"id": "a", **design}]}),
    ):  # both are worked on by processes that a worker begins beside it
        expect(path, fetched(port, path, json.dumps(question).encode())[0], 200)
    status, body = fetched(port, "/v1/loop-design", b'{"fluid": NaN}')
    expect("a body that is no JSON", status, 400)
    memory = podman("stats", "--no-stream", "--format", "{{.MemUsage}}", name).strip()
    sys.stdout.write(f"memory in use: {memory}\n")


def examples(operation: str) -> list[tuple[Path, Path, bool]]:
    """The committed questions of an operation with their answers, and whether an answer's lists are cut short."""
    folder = Path("openapi/examples")
    return [
        (
            folder / operation / f"{entry['name']}.question.json",
            folder / operation / f"{entry['name']}.answer.json",
            entry.get("shortened", False),
        )
        for entry in json.loads((folder / "index.json").read_text())
        if entry["operation"] == operation and entry.get("status", 200) == 200
    ]


def begins_as(told: Any, shown: Any) -> bool:
    """Whether an answer is the shown one but for lists that go on."""
    if isinstance(told, dict) and isinstance(shown, dict):
        return told.keys() == shown.keys() and all(begins_as(told[key], shown[key]) for key in told)
    if isinstance(told, list) and isinstance(shown, list):
        return len(told) >= len(shown) and all(map(begins_as, told, shown))
    return bool(told == shown)


if __name__ == "__main__":
    main(sys.argv[1], int(sys.argv[2]))
