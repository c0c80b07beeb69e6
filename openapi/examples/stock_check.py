"""A distributor's stock check: which vessel on the shelf fits this loop, and why not the others.

    python stock_check.py http://127.0.0.1:8000 designLoop/wash-house.question.json stock.csv

Takes a loop as a colleague has stated it, asks `POST /v1/loop-design` with the vessels on the shelf, and prints what to
take, what to set, and every vessel that was passed over with its reasons and by how much, for whoever must defend the
choice to a customer. The exit code is 1 if nothing on the shelf fits, and 2 if that could not be found out. Needs
Python 3.11 and nothing else.
"""

# ruff: noqa: S310 - whoever runs it names the URL
import csv
import json
import sys
import urllib.error
import urllib.request
from collections.abc import Iterator
from pathlib import Path
from typing import Any


class UnansweredError(Exception):
    """Nothing was found out; the message says why."""


def shelf(table: str) -> list[dict[str, Any]]:
    """The vessels on the shelf. A cell left empty is not stated, and never assumed to be enough."""
    columns = {
        "nominalVolume": ("nominal_litres", "L"),
        "ratedPressure": ("rated_barg", "barg"),
        "acceptanceVolume": ("acceptance_litres", "L"),
        "deliveredPrecharge": ("precharge_barg", "barg"),
    }
    vessels = []
    with Path(table).open(encoding="utf-8", newline="") as source:
        for line, row in enumerate(csv.DictReader(source), start=2):
            try:
                if int(row["on_shelf"]) == 0:
                    continue
                vessel: dict[str, Any] = {"id": row["article"]}
                for member, (column, unit) in columns.items():
                    if row[column]:
                        vessel[member] = {"value": float(row[column]), "unit": unit}
                if row["price"]:
                    vessel["price"] = {"amount": float(row["price"]), "currency": row["currency"]}
            except (KeyError, TypeError, ValueError) as fault:
                raise UnansweredError(f"{table}, line {line}: {fault}") from None
            vessels.append(vessel)
    if not vessels:
        raise UnansweredError(f"{table}: nothing is on the shelf")
    return vessels


def ask(url: str, question: dict[str, Any]) -> dict[str, Any]:
    """The answer, or every fault of the question at once."""
    body = json.dumps(question).encode()
    request = urllib.request.Request(f"{url}/v1/loop-design", body, {"Content-Type": "application/json"})
    try:
        with urllib.request.urlopen(request, timeout=60) as reply:
            answer: dict[str, Any] = json.load(reply)
            return answer
    except urllib.error.HTTPError as refusal:
        try:
            problem = json.load(refusal)
        except ValueError:  # a proxy in front of the service answered
            problem = {"detail": f"{url} answered {refusal.code} {refusal.reason}"}
        faults = [f"  {fault['pointer']}: {fault['message']}" for fault in problem.get("errors", [])]
        raise UnansweredError("\n".join([problem["detail"], *faults])) from None
    except OSError as fault:
        raise UnansweredError(f"no answer from {url}: {fault}") from None


def said(quantity: dict[str, Any]) -> str:
    """A quantity as people write it."""
    return f"{quantity['value']:.4g} {quantity['unit']}"


def report(answer: dict[str, Any]) -> Iterator[str]:
    """The answer in lines for a person, the verdict first."""
    result = answer["result"]
    yield f"verdict: {result['verdict']} ({result['basis']})"
    if vessel := result.get("chosenVessel"):
        yield f"take: {vessel['id']}, {said(vessel['nominalVolume'])}"
        if "coolingVessel" in vessel:
            yield f"with a cooling vessel of {said(vessel['coolingVessel']['content'])} before it"
        settings = result["settings"]
        yield f"set: precharge {said(settings['precharge'])}, fill {said(settings['fillPressure'])}"
    for other in result["selection"]["alternatives"]:
        yield f"would do too: {other['id']}"
    for refused in result["selection"]["refused"]:
        reasons = [
            f"{reason['code']} short by {said(reason['shortBy'])}" if "shortBy" in reason else reason["code"]
            for reason in refused["reasons"]
        ]
        yield f"passed over: {refused['id']}: {', '.join(reasons)}"
    for open_point in result["toConfirm"]:
        yield f"to confirm: {open_point['code']} {open_point.get('field') or open_point.get('subject', '')}".rstrip()
    for advisory in answer["advisories"]:
        yield f"{advisory['severity']}: {advisory['message']} {advisory['remedy']}"
    for caution in answer["cautions"]:
        yield f"caution: {caution['message']}"


def main(url: str, loop: str, table: str) -> int:
    """Ask and print; 1 if nothing on the shelf fits, 2 if nothing was found out."""
    question = json.loads(Path(loop).read_text(encoding="utf-8"))
    try:
        question["vessel"] = {"kind": "stock", "items": shelf(table)}
        answer = ask(url, question)
    except UnansweredError as fault:
        print(fault, file=sys.stderr)
        return 2
    print("\n".join(report(answer)))
    return 0 if "chosenVessel" in answer["result"] else 1


if __name__ == "__main__":
    if len(sys.argv) != 4:
        raise SystemExit(__doc__)
    sys.exit(main(*sys.argv[1:]))
