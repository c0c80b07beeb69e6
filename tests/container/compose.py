"""Prints the service of `deploy/compose.yaml` as options of a container engine: the tested container is that one.

Every key of the service must have its option here: one that is not known ends the run.
"""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Any

import yaml

COMPOSE = Path(__file__).resolve().parents[2] / "deploy" / "compose.yaml"
ELSEWHERE = {"image", "ports", "restart", "stop_grace_period"}
"""Which image, and what has no meaning for a container that is called from its own network and stopped by the test."""


def options(service: dict[str, Any]) -> list[str]:
    """The options."""
    found: list[str] = []
    for key, value in service.items():
        if key in ELSEWHERE:
            continue
        match key, value:
            case "user", str():
                found.append(f"--user={value}")
            case "read_only", True:
                found += ["--read-only", "--read-only-tmpfs=false"]
            case "cap_drop", list():
                found += [f"--cap-drop={one.lower()}" for one in value]
            case "security_opt", list():
                found += [f"--security-opt={one.removesuffix(':true')}" for one in value]
            case "tmpfs", list():
                found += [f"--tmpfs={one.replace(':', ':rw,', 1)}" for one in value]
            case "shm_size", str():
                found.append(
                    f"--tmpfs=/dev/shm:rw,size={value}"
                )  # the engine's own is lost on a read-only root
            case "environment", dict():
                found += [f"--env={name}={text}" for name, text in value.items()]
            case "mem_limit", str():
                found.append(f"--memory={value}")
            case "pids_limit", int():
                found.append(f"--pids-limit={value}")
            case _:
                sys.exit(f"{COMPOSE.name}: {key}: {value!r} has no option here")
    return found


if __name__ == "__main__":
    (only,) = yaml.safe_load(COMPOSE.read_text())["services"].values()
    sys.stdout.write(" ".join(options(only)) + "\n")
