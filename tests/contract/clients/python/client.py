"""What a Python caller does: a design, a batch and a refused question, through the generated classes alone."""

import json
import sys
from pathlib import Path

import loopslack_client as loopslack

where, examples = sys.argv[1], Path(sys.argv[2])


def text(place: str) -> str:
    return (examples / f"{place}.question.json").read_text(encoding="utf-8")


with loopslack.ApiClient(loopslack.Configuration(host=where)) as connection:
    designs = loopslack.DesignApi(connection)

    # A design. A member that is set to None goes out as null.
    asked = loopslack.LoopDesignQuestion.from_json(text("designLoop/wash-house"))
    asked.vessels_in_parallel = None
    assert '"vesselsInParallel": null' in asked.to_json()
    answer = designs.design_loop_with_http_info(asked, x_request_id="python-client")
    result = answer.data.result
    assert answer.headers["x-request-id"] == "python-client"
    assert result.verdict is loopslack.Verdict.HOLDS
    assert result.chosen_vessel.nominal_volume.unit is loopslack.VolumeUnit.LITRE
    assert all(isinstance(check.verdict, loopslack.CheckVerdict) for check in result.checks)

    # A batch: every design has its own outcome, in the order asked.
    batch = designs.design_loops(loopslack.LoopDesignBatchQuestion.from_json(text("designLoops/three-roofs")))
    outcomes = [(one.id, one.verdict.value if one.verdict else one.problem.status) for one in batch.designs]
    assert outcomes == [("quote-1", "holds"), ("quote-2", "holds"), ("quote-3", 422)], outcomes
    assert batch.designs[2].problem.errors[0].pointer == "/staticHeight"
    assert batch.designs[0].answer.result.chosen_vessel.id.startswith("EV-")

    # The client itself refuses what the document rules out.
    try:
        loopslack.Length(value=1, unit="metres")
    except ValueError:
        pass
    else:
        raise AssertionError("a unit that is none was taken")

    # A question only the service can refuse: all faults at once.
    content = {"Content-Type": "application/json", "Accept": "application/json"}
    reply = connection.call_api(
        "POST", f"{where}/v1/loop-design", content, json.loads(text("designLoop/misspelt"))
    )
    reply.read()
    assert reply.status == 422
    problem = loopslack.Problem.from_json(reply.data.decode())
    pointers = {fault.pointer for fault in problem.errors}
    assert {"/reliefValve/setPresure", "/staticHeight/unit", "/collectors/0/count"} <= pointers

sys.stdout.write(f"python: designed {result.chosen_vessel.id}, a batch, refused {len(pointers)} faults\n")
