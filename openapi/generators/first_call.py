"""A first call with the client that OpenAPI Generator makes with python.yaml."""

import sys

import loopslack_client as loopslack

Length, Temperature = loopslack.Length, loopslack.Temperature
pipe = loopslack.PipeSegment(
    length=Length(value=14, unit="m"),
    tube=loopslack.Tube(loopslack.StandardTube(kind="standard", standard="en-1057", size="18x1")),
)
protection = loopslack.ProtectTo(kind="protect-to", temperature=Temperature(value=-20, unit="degC"))
question = loopslack.LoopDesignQuestion(
    site=loopslack.Site(coldestOutdoorTemperature=Temperature(value=-12, unit="degC")),
    collectors=[
        loopslack.CollectorGroup(
            count=3,
            area=loopslack.Area(value=2.1, unit="m2"),
            areaBasis="aperture",
            type="flat-plate",
            emptyingClass="good",
        )
    ],
    pipeRuns=[
        loopslack.PipeRun(role=role, segments=[pipe], steamAccess="open") for role in ("flow", "return")
    ],
    fluid=loopslack.Fluid(
        loopslack.PropyleneGlycol(kind="propylene-glycol", concentration=loopslack.Concentration(protection))
    ),
    staticHeight=Length(value=8, unit="m"),
    reliefValve=loopslack.ReliefValve(setPressure=loopslack.Pressure(value=6, unit="barg")),
)

where = sys.argv[1] if len(sys.argv) > 1 else "http://127.0.0.1:8000"
with loopslack.ApiClient(loopslack.Configuration(host=where)) as connection:
    result = loopslack.DesignApi(connection).design_loop(question).result
vessel = result.chosen_vessel
size = f"{vessel.nominal_volume.value} {vessel.nominal_volume.unit.value}" if vessel else "no vessel"
sys.stdout.write(f"{result.verdict.value}: {size}\n")
