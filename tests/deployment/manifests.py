"""Holds rendered manifests to the promises a schema cannot express.

Every container keeps the restricted profile, every selector finds the pods it is meant for, and the times of a
stop fit into each other.
"""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Any

import yaml

SERVER_GRACE_SECONDS = 20  # graceful_timeout of deploy/gunicorn.conf.py


def faults_of(documents: list[dict[str, Any]]) -> list[str]:
    """What is wrong with one rendered set of manifests."""
    by_kind = {document["kind"]: document for document in documents}
    pod = by_kind["Deployment"]["spec"]["template"]
    labels = pod["metadata"]["labels"].items()
    spec = pod["spec"]
    faults = []
    if not spec["securityContext"]["runAsNonRoot"] or spec["automountServiceAccountToken"]:
        faults.append("the pod may run as root or carries a token of the cluster")
    if spec["securityContext"]["seccompProfile"]["type"] != "RuntimeDefault":
        faults.append("the pod has no system call filter")
    for container in spec["containers"]:
        context = container["securityContext"]
        if context["allowPrivilegeEscalation"] or not context["readOnlyRootFilesystem"]:
            faults.append(f"{container['name']} may gain privileges or write to its root")
        if context["capabilities"] != {"drop": ["ALL"]}:
            faults.append(f"{container['name']} keeps capabilities")
        if "memory" not in container["resources"]["limits"] or "cpu" in container["resources"]["limits"]:
            faults.append(f"{container['name']} should have a limit on memory and none on the processor")
        ports = {port["name"] for port in container["ports"]}
        probes = [container[f"{name}Probe"]["httpGet"] for name in ("startup", "readiness", "liveness")]
        if [probe["path"] for probe in probes] != ["/readyz", "/readyz", "/livez"]:
            faults.append(f"{container['name']} asks the wrong probes")
        if {probe["port"] for probe in probes} | {
            by_kind["Service"]["spec"]["ports"][0]["targetPort"]
        } != ports:
            faults.append("a probe or the Service names a port the container does not have")
        wait = container["lifecycle"]["preStop"]["sleep"]["seconds"]
        if wait + SERVER_GRACE_SECONDS >= spec["terminationGracePeriodSeconds"]:
            faults.append("the pod is killed before the server has stopped")
    selectors = {
        "Deployment": by_kind["Deployment"]["spec"]["selector"]["matchLabels"],
        "Service": by_kind["Service"]["spec"]["selector"],
        "PodDisruptionBudget": by_kind["PodDisruptionBudget"]["spec"]["selector"]["matchLabels"],
        "NetworkPolicy": by_kind["NetworkPolicy"]["spec"]["podSelector"]["matchLabels"],
    }
    faults += [
        f"{kind} selects other pods" for kind, wanted in selectors.items() if not wanted.items() <= labels
    ]
    target = by_kind["HorizontalPodAutoscaler"]["spec"]["scaleTargetRef"]
    if (target["kind"], target["name"]) != ("Deployment", by_kind["Deployment"]["metadata"]["name"]):
        faults.append("the autoscaler scales something else")
    if by_kind["HorizontalPodAutoscaler"]["spec"]["minReplicas"] < 2:
        faults.append("one replica cannot keep the disruption budget")
    return faults


def main(paths: list[str]) -> int:
    """Print every fault; 1 if there is one."""
    status = 0
    for path in paths:
        faults = faults_of([document for document in yaml.safe_load_all(Path(path).read_text()) if document])
        sys.stdout.write(f"{path}: {'; '.join(faults) or 'keeps its promises'}\n")
        status |= bool(faults)
    return status


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
