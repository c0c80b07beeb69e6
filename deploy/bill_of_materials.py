"""Writes what an image holds, as a CycloneDX 1.6 document: its Python and its Debian packages.

Runs inside the image with the image's own Python, so that the list is what is there and not what was asked for.
Standard library only.
"""

import json
import sys
from importlib.metadata import Distribution, distributions
from pathlib import Path
from typing import Any

DEBIAN_STATUS = Path("/var/lib/dpkg/status")


def python_component(distribution: Distribution) -> dict[str, Any]:
    """Describe one installed Python package."""
    name = distribution.metadata["Name"].lower().replace("_", "-")
    component: dict[str, Any] = {
        "type": "library",
        "name": name,
        "version": distribution.version,
        "purl": f"pkg:pypi/{name}@{distribution.version}",
        "bom-ref": f"python:{name}",
    }
    licence = distribution.metadata.get("License-Expression")
    if licence:
        component["licenses"] = [{"expression": licence}]
    return component


def debian_component(fields: dict[str, str]) -> dict[str, Any]:
    """Describe one Debian package from its control fields."""
    name, version, architecture = fields["Package"], fields["Version"], fields["Architecture"]
    return {
        "type": "library",
        "name": name,
        "version": version,
        "purl": f"pkg:deb/debian/{name}@{version.replace('+', '%2B')}?arch={architecture}",
        "bom-ref": f"debian:{name}",
    }


def debian_packages(status: str) -> list[dict[str, str]]:
    """Read the control fields of each package, without their continued lines."""
    return [
        dict(line.split(": ", 1) for line in paragraph.splitlines() if ": " in line and line[0] != " ")
        for paragraph in status.split("\n\n")
        if paragraph.strip()
    ]


def document() -> dict[str, Any]:
    """Assemble the document; the service itself is its subject, not one of its parts."""
    python = {component["name"]: component for component in map(python_component, distributions())}
    service = {**python.pop("loopslack"), "type": "application"}
    debian = []
    if DEBIAN_STATUS.exists():
        debian = [debian_component(fields) for fields in debian_packages(DEBIAN_STATUS.read_text())]
    parts = [python[name] for name in sorted(python)] + sorted(debian, key=lambda part: str(part["name"]))
    return {
        "bomFormat": "CycloneDX",
        "specVersion": "1.6",
        "version": 1,
        "metadata": {"component": service},
        "components": parts,
        "dependencies": [{"ref": service["bom-ref"], "dependsOn": [part["bom-ref"] for part in parts]}],
    }


if __name__ == "__main__":
    Path(sys.argv[1]).write_text(json.dumps(document(), indent=1) + "\n")
