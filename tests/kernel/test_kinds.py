"""The pairs that people mix up cannot be mixed up: a type checker refuses them, and so does a derivation."""

import subprocess
import sys
from pathlib import Path

import pytest

from loopslack.kernel import kinds
from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import EQUATIONS, equation, papers
from loopslack.kernel.value import Given, Value

SERVICE = Path(__file__).parents[2] / "service"
PAIRS = [
    ("GaugePressure", "AbsolutePressure"),
    ("Temperature", "TemperatureDifference"),
    ("MassFraction", "VolumeFraction"),
    ("NominalVolume", "AcceptanceVolume"),
    ("NominalVolume", "Volume"),
    ("PressureDifference", "GaugePressure"),
    ("HeatLossCoefficient", "QuadraticHeatLossCoefficient"),
    ("Conductivity", "LinearConductance"),
    ("ExpansionCoefficient", "Ratio"),
]


def test_a_derivation_refuses_a_value_of_another_kind(monkeypatch: pytest.MonkeyPatch) -> None:
    for wanted, given in [*PAIRS, *(pair[::-1] for pair in PAIRS)]:
        monkeypatch.setattr("loopslack.kernel.equation.EQUATIONS", {})

        def same(number: float) -> float:
            return number

        same.__annotations__ = {"number": getattr(kinds, wanted), "return": kinds.Ratio}
        law = papers(equation("same", law="y = x", source=DERIVED)(same))
        kind = kinds.KIND_OF[getattr(kinds, given)]
        with pytest.raises(TypeError, match=kind.name):
            law.derive(number=Value(1.0, kind, "x", Given()))
        right = kinds.KIND_OF[getattr(kinds, wanted)]
        assert law.derive(number=Value(0.5, right, "x", Given())).si == 0.5


def test_the_type_checker_refuses_every_mix_up_and_accepts_what_is_right(tmp_path: Path) -> None:
    lines = ["from loopslack.kernel.kinds import *"]
    bad = []
    for n, (one, other) in enumerate(PAIRS):
        lines += [f"def one_{n}(x: {one}) -> None: ...", f"def other_{n}(x: {other}) -> None: ..."]
        lines += [f"one_{n}({one}(1.0)); other_{n}({other}(1.0))"]
        for call in (f"one_{n}({other}(1.0))", f"other_{n}({one}(1.0))", f"one_{n}(1.0)"):
            lines.append(call)
            bad.append(len(lines))
    snippet = tmp_path / "mixed_up.py"
    snippet.write_text("\n".join(lines), encoding="utf-8")
    ran = subprocess.run(
        [
            sys.executable,
            "-m",
            "mypy",
            "--strict",
            "--config-file=",
            "--no-error-summary",
            f"--cache-dir={tmp_path / 'cache'}",
            "--follow-imports=silent",
            str(snippet),
        ],
        cwd=tmp_path,
        env={"MYPYPATH": str(SERVICE), "PATH": "/usr/bin:/bin"},
        capture_output=True,
        text=True,
        check=False,
    )
    found = {
        int(line.split(":")[1])
        for line in ran.stdout.splitlines()
        if line.startswith("mixed_up") and "error" in line
    }
    assert found == set(bad), ran.stdout + ran.stderr
    assert ran.stdout.count("[arg-type]") == len(bad)


def test_a_value_has_no_arithmetic() -> None:
    value = Value(1.0, kinds.VOLUME, "content", Given("/content"))
    for slip in ("value + value", "value * 2", "value < value", "float(value)"):
        with pytest.raises(TypeError):
            eval(slip, {"value": value, "float": float})  # noqa: S307 - our own text


def test_a_formula_without_kinds_is_not_entered() -> None:
    before = set(EQUATIONS)

    def bare(number: float) -> kinds.Ratio:
        return kinds.Ratio(number)

    with pytest.raises(TypeError, match="what kind"):
        equation("bare", law="y = x", source=DERIVED)(bare)
    assert set(EQUATIONS) == before
