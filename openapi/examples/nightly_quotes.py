"""A quoting platform's nightly job: every open quote gets a design, a hundred at a time.

    python nightly_quotes.py http://127.0.0.1:8000 quotes.csv designs.csv

Reads the platform's own table, asks `POST /v1/loop-design/batch`, and writes one row for each quote. What a caller of
the service should do is all here: what all quotes share goes into the defaults; a batch that is too large is halved; an
answer that says to come again is waited for; a broken connection is tried again, since a question changes nothing. A
row that is no quote, or that the service refuses, is told as such and keeps no other from its design.
Needs Python 3.11 and nothing else.
"""

# ruff: noqa: S310 - whoever runs it names the URL
import csv
import json
import sys
import time
import urllib.error
import urllib.request
from collections.abc import Iterator
from pathlib import Path
from typing import Any

AT_ONCE = 100
ATTEMPTS = 5
COLUMNS = [
    "quote",
    "verdict",
    "basis",
    "vessel_litres",
    "cooling_litres",
    "precharge_barg",
    "fill_barg",
    "remark",
]


def quantity(value: object, unit: str) -> dict[str, Any]:
    """A number from the table, with the unit the table has it in."""
    return {"value": float(str(value)), "unit": unit}


DEFAULTS = {
    "fluid": {
        "kind": "propylene-glycol",
        "concentration": {"kind": "by-volume", "share": quantity(42, "volume-percent")},
    },
    "reliefValve": {"setPressure": quantity(6, "barg"), "nominalSize": "DN20"},
    "station": {"ratedPressure": quantity(10, "barg"), "highestTemperature": quantity(140, "degC")},
    "pump": {"head": quantity(0.4, "bar"), "netPositiveSuction": quantity(2, "mH2O")},
    "vessel": {"kind": "series", "ratedPressure": quantity(10, "barg")},
}


def design(row: dict[str, str]) -> dict[str, Any]:
    """One row of the platform's table as a design."""
    run = {
        "segments": [
            {
                "length": quantity(row["pipe_m"], "m"),
                "tube": {"kind": "bore", "bore": quantity(row["bore_mm"], "mm")},
            }
        ],
        "steamAccess": "open",
    }
    return {
        "id": row["quote"],
        "site": {
            "coldestOutdoorTemperature": quantity(row["coldest_c"], "degC"),
            "altitude": quantity(row["altitude_m"], "m"),
        },
        "collectors": [
            {
                "count": int(row["collectors"]),
                "area": quantity(row["aperture_m2"], "m2"),
                "areaBasis": "aperture",
                "type": "flat-plate",
                "emptyingClass": row["emptying"],
                "coefficients": {
                    "eta0": 0.79,
                    "a1": quantity(3.7, "W/m2K"),
                    "a2": quantity(0.014, "W/m2K2"),
                    "basis": "aperture",
                },
                "ratedPressure": quantity(10, "barg"),
            }
        ],
        "pipeRuns": [{**run, "role": "flow"}, {**run, "role": "return"}],
        "staticHeight": quantity(row["height_m"], "m"),
    }


def post(url: str, body: bytes) -> tuple[int, dict[str, Any], str]:
    """Send a body; the status, the answer and what `Retry-After` says."""
    request = urllib.request.Request(
        url, body, {"Content-Type": "application/json", "X-Request-Id": "nightly-quotes"}
    )
    try:
        with urllib.request.urlopen(request, timeout=120) as reply:
            return reply.status, json.load(reply), ""
    except urllib.error.HTTPError as refusal:
        try:
            problem = json.load(refusal)
        except ValueError:  # a proxy in front of the service answered
            problem = {"title": refusal.reason, "detail": "not a problem document", "requestId": "unknown"}
        return refusal.code, problem, refusal.headers.get("Retry-After", "")


def readable(row: dict[str, str]) -> dict[str, Any] | None:
    """The design of a row, or nothing where a cell holds no number."""
    try:
        return design(row)
    except (TypeError, ValueError):
        return None


def outcomes(url: str, designs: list[dict[str, Any]]) -> Iterator[dict[str, Any]]:
    """The outcome of every design, in order."""
    body = json.dumps({"defaults": DEFAULTS, "designs": designs}).encode()
    for attempt in range(ATTEMPTS):
        try:
            status, answer, retry_after = post(f"{url}/v1/loop-design/batch", body)
        except OSError:
            time.sleep(2**attempt)
            continue
        if status == 200:
            yield from answer["designs"]
            return
        if status == 413 and len(designs) > 1:
            half = len(designs) // 2
            yield from outcomes(url, designs[:half])
            yield from outcomes(url, designs[half:])
            return
        if status not in {429, 502, 503, 504}:
            raise SystemExit(f"{answer['title']}: {answer['detail']} (request {answer['requestId']})")
        time.sleep(float(retry_after or 1))
    raise SystemExit(f"no answer from {url} in {ATTEMPTS} attempts")


def row_of(outcome: dict[str, Any]) -> dict[str, object]:
    """One row of the result: a vessel only where the verdict allows one."""
    if "problem" in outcome:
        faults = outcome["problem"].get("errors") or [{"message": outcome["problem"]["detail"]}]
        return {
            "quote": outcome.get("id"),
            "verdict": "refused",
            "remark": " ".join(f["message"] for f in faults),
        }
    result = outcome["answer"]["result"]
    row: dict[str, object] = {"quote": outcome["id"], "verdict": result["verdict"], "basis": result["basis"]}
    if vessel := result.get("chosenVessel"):
        row["vessel_litres"] = vessel["nominalVolume"]["value"]
        row["cooling_litres"] = vessel.get("coolingVessel", {}).get("content", {}).get("value", 0)
        row["precharge_barg"] = result["settings"]["precharge"]["value"]
        row["fill_barg"] = result["settings"]["fillPressure"]["value"]
    stops = [
        advisory["message"] for advisory in outcome["answer"]["advisories"] if advisory["severity"] == "stop"
    ]
    return row | {"remark": " ".join(stops)}


def main(url: str, table: str, result: str) -> None:
    """Design every quote of a table and write the result beside it."""
    with Path(table).open(encoding="utf-8", newline="") as source:
        quotes = list(csv.DictReader(source))
    counts: dict[str, int] = {}
    with Path(result).open("w", encoding="utf-8", newline="") as target:
        writer = csv.DictWriter(target, COLUMNS)
        writer.writeheader()
        for start in range(0, len(quotes), AT_ONCE):
            read = [(quote["quote"], readable(quote)) for quote in quotes[start : start + AT_ONCE]]
            designs = [asked for _, asked in read if asked]
            told = outcomes(url, designs) if designs else iter(())
            for quote, asked in read:
                row = row_of(next(told)) if asked else {"quote": quote, "verdict": "unreadable"}
                writer.writerow(row)
                counts[str(row["verdict"])] = counts.get(str(row["verdict"]), 0) + 1
    summary = ", ".join(f"{count} {verdict}" for verdict, count in sorted(counts.items()))
    print(f"{len(quotes)} quotes: {summary}")


if __name__ == "__main__":
    if len(sys.argv) != 4:
        raise SystemExit(__doc__)
    main(*sys.argv[1:])
