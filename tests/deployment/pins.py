"""Holds the requirement files that `deploy/lock.sh` writes against what it reads: whatever is asked for is pinned.

`lock.sh` itself needs an index of packages, which no test may depend on; a file it should have written anew is found.
"""

from __future__ import annotations

import re
import sys
import tomllib
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
LOCKED = {
    "deploy/requirements.txt": (["deploy/requirements.in"], ["sheet"]),
    "deploy/speed-requirements.txt": (["deploy/speed-requirements.in"], None),
    "tests/requirements.txt": (["deploy/requirements.in", "tests/requirements.in"], ["sheet", "tracing"]),
    "tests/tools-requirements.txt": (["tests/tools-requirements.in"], None),
    "tests/node-requirements.txt": (["tests/node-requirements.in"], None),
}
"""Each file that is written: the files it is made of, and the extras of the project, or None where it has no part."""


def wanted(files: list[str], extras: list[str] | None) -> list[str]:
    """What is asked for, as it is written."""
    found = [
        line.partition("#")[0].strip() for name in files for line in (ROOT / name).read_text().splitlines()
    ]
    if extras is not None:
        project = tomllib.loads((ROOT / "pyproject.toml").read_text())["project"]
        found += project["dependencies"]
        found += [line for extra in extras for line in project["optional-dependencies"][extra]]
    return [line for line in found if line and not line.startswith("-")]


def plain(name: str) -> str:
    """The name of a package as indexes compare it."""
    return re.sub(r"[-_.]+", "-", name).lower()


def faults_of(name: str) -> list[str]:
    """What is wrong with one written file."""
    text = (ROOT / name).read_text()
    blocks = re.split(r"\n(?=\S)", text.strip())
    pins = {plain(found[1]): found[2] for block in blocks if (found := re.match(r"([\w.-]+)==(\S+)", block))}
    faults = [f"{block.split()[0]} has no hash" for block in blocks if "--hash=sha256:" not in block]
    for line in wanted(*LOCKED[name]):
        found = re.match(r"([\w.-]+)(?:\[[^]]*\])?\s*(==)?\s*([^;\s]*)", line)
        if found is None or plain(found[1]) not in pins:
            faults.append(f"{line} is not pinned")
        elif found[2] and pins[plain(found[1])] != found[3]:
            faults.append(f"{line} is pinned as {pins[plain(found[1])]}")
    return faults


def main() -> int:
    """Print every file and its faults; 1 if there is one."""
    status = 0
    for name in LOCKED:
        faults = faults_of(name)
        sys.stdout.write(f"{name}: {'; '.join(faults) or 'pins what is asked for, by hash'}\n")
        status |= bool(faults)
    return status


if __name__ == "__main__":
    sys.exit(main())
