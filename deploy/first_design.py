"""Sends the example design to the service and prints the answer for a person.

Called by `up.sh`, before the service has an environment of its own too: standard library only. It also tells
whether a port is free and waits until the service is ready. Nothing here computes: every number printed stands in
the answer.
"""

from __future__ import annotations

import argparse
import http.client
import json
import socket
import sys
import textwrap
import time
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import Any

ROOT = Path(__file__).resolve().parents[1]
EXAMPLE = ROOT / "openapi" / "examples" / "loop-design.json"
SECONDS_TO_START = 60.0
WIDTH = 100
LABEL = 20

VERDICTS = {
    "holds": "HOLDS in the base case and under every doubt that was asked for",
    "favourable-only": "HOLDS ONLY IF EVERYTHING IS AS ASSUMED: a doubt breaks it. Do not build it like this.",
    "does-not-hold": "DOES NOT HOLD. Do not build it like this.",
    "not-assessed": "NOT ASSESSED: a check that decides could not be computed. This is no pass.",
}
BASES = {
    "firm": "firm: everything that decides was stated",
    "provisional": "provisional: something is still to be confirmed, see below",
}
SCENARIOS = {
    "base": "base case",
    "warm-gas": "warm gas",
    "hotter-stagnation": "hotter at rest",
    "worse-emptying": "worse emptying",
    "closed-branch": "closed branch",
    "all-doubts": "all doubts at once",
}
UNITS = {"degC": "°C", "degF": "°F", "m2": "m²", "m3": "m³", "K": "K"}

Answer = dict[str, Any]


def main() -> int:
    """Do what the arguments ask for; the exit code is 1 where there is no answer to show."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--port", type=int, required=True)
    parser.add_argument("--free", action="store_true", help="only tell whether the port is free")
    parser.add_argument("--server", type=int, help="process of the server, to notice if it ends")
    asked = parser.parse_args()
    if asked.free:
        return port_is_free(asked.port)
    if not wait_until_ready(asked.port, asked.server):
        return 1
    began = time.perf_counter()
    status, body = fetched(asked.port, "POST", "/v1/loop-design", EXAMPLE.read_bytes())
    milliseconds = (time.perf_counter() - began) * 1e3
    if status != http.client.OK:
        sys.stderr.write(f"The service answered {status} to {EXAMPLE.relative_to(ROOT)}:\n{body.decode()}\n")
        return 1
    print(f"Sent {EXAMPLE.relative_to(ROOT)} to POST /v1/loop-design; answered in {milliseconds:.0f} ms.\n")
    for line in sheet(json.loads(body)):
        print(line)
    print(f"\n{'Docs':<{LABEL}}http://127.0.0.1:{asked.port}/docs")
    print(f"{'Contract':<{LABEL}}http://127.0.0.1:{asked.port}/v1/openapi.json")
    return 0


def port_is_free(port: int) -> int:
    """Tell whether the service could listen on the port of the loopback address; 1 and a remedy if not."""
    with socket.socket() as probe:
        probe.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        try:
            probe.bind(("127.0.0.1", port))
        except PermissionError:
            sys.stderr.write(f"Port {port} may not be used by this user. Another one: --port 8001\n")
            return 1
        except OSError:
            other = port + 1 if port < 65535 else 8000
            sys.stderr.write(f"Port {port} is taken by another program. Another one: --port {other}\n")
            return 1
    return 0


def wait_until_ready(port: int, server: int | None) -> bool:
    """Wait until the service says it is ready; False, and why, if it ends or takes too long."""
    deadline = time.monotonic() + SECONDS_TO_START
    while time.monotonic() < deadline:
        try:
            if fetched(port, "GET", "/readyz")[0] == http.client.OK:
                return True
        except OSError:
            if server is not None and has_ended(server):
                sys.stderr.write("The server ended before it was ready.\n")
                return False
        time.sleep(0.05)
    sys.stderr.write(f"The server was not ready within {SECONDS_TO_START:.0f} s.\n")
    return False


def has_ended(process: int) -> bool:
    """Tell whether a process is gone, or only waits for its parent to notice; unknown without /proc."""
    if not Path("/proc/self").exists():
        return False
    try:
        state = Path(f"/proc/{process}/stat").read_text().rpartition(")")[2].split()[0]
    except OSError:
        return True
    return state == "Z"


def fetched(port: int, method: str, path: str, body: bytes | None = None) -> tuple[int, bytes]:
    """Ask the service; status and body."""
    connection = http.client.HTTPConnection("127.0.0.1", port, timeout=30)
    try:
        connection.request(method, path, body, {"Content-Type": "application/json"} if body else {})
        answer = connection.getresponse()
        return answer.status, answer.read()
    finally:
        connection.close()


def sheet(answer: Answer) -> Iterator[str]:
    """Lay the answer out line by line, the verdict first."""
    result = answer["result"]
    yield from entry("Verdict", VERDICTS.get(result["verdict"], result["verdict"]))
    yield from entry("Basis", BASES.get(result["basis"], result["basis"]))
    robust = "does" if result["robust"] else "does not"
    yield from entry("Robust", f"it {robust} survive all doubts at once")
    yield ""
    yield from vessel(result)
    yield from settings(result)
    yield ""
    yield from stagnation(result["stagnation"])
    yield ""
    yield from checks(result)
    yield from confirmations(result["toConfirm"])
    yield from notes(answer)


def vessel(result: Answer) -> Iterator[str]:
    """The vessel to take, or the nearest one with the warning not to."""
    chosen = result.get("chosenVessel")
    shown = chosen or result.get("nearestVessel")
    if shown is None:
        yield from entry("Vessel", "none of the candidates comes near")
        return
    size = f"{told(shown['nominalVolume'])} ({shown['id']})"
    if shown["pieces"] > 1:
        size = f"{shown['pieces']} x {size}"
    if "ratedPressure" in shown:
        size += f", rated {told(shown['ratedPressure'])}"
    yield from entry(
        "Chosen vessel" if chosen else "Nearest vessel", size if chosen else f"{size}: DO NOT BUILD"
    )
    if "coolingVessel" in shown:
        cooling = shown["coolingVessel"]
        yield from entry("  with", f"cooling vessel of {told(cooling['content'])}. {cooling['place']}")
    yield from entry("Loop content", told(result["content"]["total"]))


def settings(result: Answer) -> Iterator[str]:
    """The pressures for the installer."""
    card = result.get("settings")
    if card is None:
        yield from entry("Pressures", "none: there is no fill pressure at which every check holds")
        return
    window = card["window"]
    at = f"at {told(window['temperature'])}"
    yield from entry("Precharge", f"{told(card['precharge'])} at {told(card['prechargeTemperature'])}")
    yield from entry("Fill pressure", f"{told(card['fillPressure'])} at the vessel, {at}")
    yield from entry("  window", f"{told(window['lower'])} to {told(window['upper'])}, {at}")
    yield from entry(
        "Final pressure", f"{told(card['finalPressure'])} with the relief valve sure to stay shut"
    )
    yield from entry("Relief valve", f"set to {told(card['reliefSetPressure'])}")


def stagnation(states: list[Answer]) -> Iterator[str]:
    """What the loop does at rest in full sun, in the base case and in the doubt with most steam."""
    base = next(state for state in states if state["scenario"] == "base")
    worst = max(states, key=lambda state: float(state["steamVolume"]["value"]))
    yield from scenario("In stagnation", base)
    if worst is not base:
        yield from scenario(SCENARIOS.get(worst["scenario"], worst["scenario"]).capitalize(), worst)


def scenario(label: str, state: Answer) -> Iterator[str]:
    """One state of stagnation with its steam reach."""
    bound = "at least " if state.get("lowerBound") else ""
    pressure = (
        f"{bound}{told(state['vesselPressure'])} at the vessel"
        if "vesselPressure" in state
        else "vessel full"
    )
    yield from entry(
        label,
        f"{state['regime']}; {told(state['steamTemperature'])}, {pressure}, "
        f"{bound}{told(state['steamVolume'])} of steam",
    )
    reaches = [
        f"{reach['pipeRun']} {told(reach['reach'])} of {told(reach['length'])}" for reach in state["reach"]
    ]
    yield from entry("  steam reach", bound + ", ".join(reaches) if reaches else "no open pipe run")
    unspent = state["unspentPower"]
    if float(unspent["value"]) > 0.0:
        yield from entry("", f"{told(unspent)} of steam power reach the station")


def checks(result: Answer) -> Iterator[str]:
    """How many checks hold; those that do not, one by one."""
    listed = result["checks"]
    holding = sum(check["verdict"] == "holds" for check in listed)
    doubts = [f"{SCENARIOS.get(doubt['id'], doubt['id'])}: {doubt['verdict']}" for doubt in result["doubts"]]
    yield from entry("Checks", f"{holding} of {len(listed)} hold")
    yield from entry("Doubts", "; ".join(doubts) or "none were asked for")
    for check in listed:
        if check["verdict"] != "holds":
            yield from entry(f"  {check['verdict']}", check_in_words(check))


def check_in_words(check: Answer) -> str:
    """A check with its value and limit, or why it has none."""
    words = [check["code"]]
    if "subject" in check:
        words.append(f"of {check['subject']}")
    words.append(f"({SCENARIOS.get(check['scenario'], check['scenario'])})")
    if "value" in check and "limit" in check:
        words.append(f"is {told(check['value'])} against {told(check['limit'])}")
    if "reason" in check:
        words.append(check["reason"])
    return " ".join(words)


def confirmations(listed: list[Answer]) -> Iterator[str]:
    """What somebody still has to confirm."""
    for item in listed:
        place = item.get("field") or item.get("subject") or ""
        yield from entry("To confirm", f"{item['code']} {place}".strip())


def notes(answer: Answer) -> Iterator[str]:
    """Advisories, assumptions and cautions."""
    for advisory in answer["advisories"]:
        yield from entry(advisory["severity"].capitalize(), f"{advisory['message']} {advisory['remedy']}")
    count = len(answer["assumptions"])
    yield from entry(
        "Assumptions", f"{count} defaults of the trade were used; the answer lists each with its source"
    )
    yield ""
    for caution in answer["cautions"]:
        yield from entry("Caution", caution["message"])


def entry(label: str, words: str) -> Iterable[str]:
    """A label and its words, wrapped beside it."""
    lines = textwrap.wrap(words, WIDTH - LABEL, break_on_hyphens=False) or [""]
    return [f"{label if number == 0 else '':<{LABEL}}{line}".rstrip() for number, line in enumerate(lines)]


def told(quantity: Answer) -> str:
    """A quantity with four significant digits, which is more than an installer can set."""
    unit = quantity["unit"]
    number = f"{float(quantity['value']):.4g}"
    if "e" in number:
        number = f"{float(quantity['value']):.0f}"
    return f"{number} {UNITS.get(unit, unit)}"


if __name__ == "__main__":
    sys.stdout.reconfigure(errors="replace")  # type: ignore[union-attr]  # it is a stream of text
    sys.exit(main())
