"""The command line: `loopslack design question.json` and its neighbours.

The same questions as those of the service, answered in this process: no server, no network. Files of many designs
have a door of their own, `loopslack.bulk`, which takes over the process when it is asked for.
"""

from __future__ import annotations

import argparse
import os
import sys
import traceback
from collections.abc import Callable, Iterator
from importlib.resources import files
from pathlib import Path
from typing import Any, NoReturn

import msgspec

from loopslack import __version__
from loopslack.contract.answering import loop as answering
from loopslack.contract.answers.operations import LoopDesignAnswer, LoopDesignResult, StagnationCheckAnswer
from loopslack.contract.encoding import encoded
from loopslack.contract.questions import operations as questions
from loopslack.contract.questions.many import FigureQuestion, SheetQuestion
from loopslack.contract.refusals import Refused, refusal_of
from loopslack.contract.strict.decoding import decode
from loopslack.kernel.errors import CalculationError

HOLDS, DOES_NOT_HOLD, REFUSED, FAULT = range(4)

_EXIT_CODES = """\
exit codes: 0 the loop holds, or the command has done what it should; 1 it does not hold (nor does one that is
`favourable-only` or `not-assessed`); 2 the question or the command cannot be read or answered; 3 a fault of ours.
"""
_SERVE = """\
The service is served by gunicorn:

  gunicorn --worker-class loopslack.worker.Worker --bind 127.0.0.1:8000 loopslack.app:app

`deploy/gunicorn.conf.py` of the source has the configuration it was measured with, `deploy/` the container, the
manifests and the unit. Settings are read from variables named LOOPSLACK_..., which its DEVELOPERS.md lists.
"""


class _UnreadableError(Exception):
    """There is no question to read."""


_Judged = LoopDesignAnswer | StagnationCheckAnswer


def main(arguments: list[str] | None = None) -> int:
    """Run a command; answers the exit code."""
    words = sys.argv[1:] if arguments is None else arguments
    if words[:1] == ["bulk"]:
        _hand_over("loopslack.bulk", words[1:])
    asked = _parser().parse_args(words)
    run: Callable[[argparse.Namespace], int] = asked.run
    try:
        return run(asked)
    except CalculationError as error:
        return _tell(refusal_of(error))
    except Refused as refused:
        return _tell(refused)
    except _UnreadableError as error:
        sys.stderr.write(f"loopslack: {error}\n")
        return REFUSED
    except Exception:  # noqa: BLE001 - an exit code of 1, the interpreter's own, would read as a verdict
        traceback.print_exc()
        return FAULT


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="loopslack",
        description="Sizes the expansion vessel of a closed glycol collector loop and checks it in stagnation.",
        epilog=_EXIT_CODES,
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("--version", action="version", version=f"loopslack {__version__}")
    commands = parser.add_subparsers(metavar="COMMAND", required=True)
    for name, meaning, run in (
        ("design", "design a loop: choose its vessel, say what to set and what to order", _design),
        ("check", "check a given vessel in stagnation", _check),
    ):
        command = commands.add_parser(name, help=meaning, description=meaning)
        _add_question(command)
        command.add_argument("--brief", action="store_true", help="print what matters, in words")
        command.set_defaults(run=run)
    sheet = commands.add_parser("sheet", help="set a design as a page to print", description=_sheet.__doc__)
    _add_question(sheet)
    form = sheet.add_mutually_exclusive_group()
    form.add_argument("--pdf", dest="form", action="store_const", const="pdf", help="as PDF")
    form.add_argument("--html", dest="form", action="store_const", const="html", help="as HTML, the default")
    form.add_argument(
        "--figure", dest="form", action="store_const", const="figure", help="one drawing, as SVG"
    )
    sheet.add_argument(
        "--into", metavar="OUT", type=Path, help="the file to write; standard output by default"
    )
    sheet.set_defaults(run=_sheet, form="html")
    # listed for its help alone: the words behind it are read by its own door
    commands.add_parser("bulk", help="answer a file of designs, by the million", add_help=False)
    document = commands.add_parser("openapi", help="print the OpenAPI document of the service")
    document.add_argument("--yaml", action="store_true", help="as YAML")
    document.set_defaults(run=_openapi)
    serve = commands.add_parser("serve", help="say how the service is served")
    serve.set_defaults(run=_serve)
    return parser


def _add_question(command: argparse.ArgumentParser) -> None:
    command.add_argument("question", metavar="FILE", help="the question in JSON; - reads standard input")


def _design(asked: argparse.Namespace) -> int:
    return _judge(asked, questions.LoopDesignQuestion, answering.design_loop)


def _check(asked: argparse.Namespace) -> int:
    return _judge(asked, questions.StagnationCheckQuestion, answering.check_stagnation)


def _judge(asked: argparse.Namespace, question: type[Any], answer: Callable[[Any], _Judged]) -> int:
    found = answer(decode(_read(asked.question), question))
    if asked.brief:
        for line in _brief(found):
            print(line)
    else:
        _write(encoded(found) + b"\n")
    return HOLDS if found.result.verdict == "holds" else DOES_NOT_HOLD


def _sheet(asked: argparse.Namespace) -> int:
    """Set a design as a page to print. FILE is the question of a sheet, or of the design alone."""
    # A tenth of a second that no other command needs to wait for.
    from loopslack.sheet import rendering  # noqa: PLC0415 - see above

    body = _read(asked.question)
    if asked.form == "figure":
        content = rendering.figure_svg(decode(body, FigureQuestion))
    else:
        question = decode(_as_sheet(body), SheetQuestion)
        content = (rendering.sheet_pdf if asked.form == "pdf" else rendering.sheet_html)(question)
    if asked.into is None:
        _write(content)
    else:
        asked.into.write_bytes(content)
    return HOLDS


def _as_sheet(body: bytes) -> bytes:
    """The question of a sheet, made of that of a design where it is one."""
    try:
        members = msgspec.json.decode(body, type=dict[str, msgspec.Raw])
    except (msgspec.DecodeError, RecursionError):
        return body
    return body if "design" in members else b'{"design":%b}' % body


def _openapi(asked: argparse.Namespace) -> int:
    name = "v1.yaml" if asked.yaml else "v1.json"
    _write((files("loopslack") / "api" / "document" / name).read_bytes())
    return HOLDS


def _serve(_: argparse.Namespace) -> int:
    print(_SERVE, end="")
    return HOLDS


def _brief(answer: _Judged) -> Iterator[str]:
    """What matters of an answer, in lines for a person."""
    result = answer.result
    yield f"verdict    {result.verdict}, {result.basis}"
    if isinstance(result, LoopDesignResult):
        vessel = result.chosen_vessel or result.nearest_vessel
        settings = result.settings
        if vessel is not None:
            pieces = f"{vessel.pieces} x " if vessel.pieces > 1 else ""
            word = "chosen" if result.chosen_vessel is not None else "nearest, not to be built"
            yield f"vessel     {vessel.id}: {pieces}{_shown(vessel.nominal_volume)} ({word})"
            if vessel.cooling_vessel is not None:
                yield f"cooling    {_shown(vessel.cooling_vessel.content)} before it"
        if settings is not None and result.chosen_vessel is not None:
            yield f"precharge  {_shown(settings.precharge)} at {_shown(settings.precharge_temperature)}"
            yield f"fill       {_shown(settings.fill_pressure)}"
    for point in result.to_confirm:
        place = point.field or point.subject
        yield f"confirm    {point.code}{f' ({place})' if place else ''}"
    for advisory in answer.advisories:
        yield f"{advisory.severity:<10} {advisory.message} {advisory.remedy}"


def _shown(quantity: Any) -> str:  # noqa: ANN401 - quantities of answers have no common type
    return f"{quantity.value:g} {quantity.unit}"


def _tell(refused: Refused) -> int:
    """Say what is wrong with a question, every fault on a line of its own."""
    sys.stderr.write(f"loopslack: {refused.kind.title.lower()}: {refused.detail}\n")
    for fault in refused.faults:
        sys.stderr.write(f"  {fault.pointer or '(all of it)'}: {fault.message}\n")
    if refused.further:
        sys.stderr.write(f"  and {refused.further} more\n")
    return REFUSED


def _read(name: str) -> bytes:
    try:
        return sys.stdin.buffer.read() if name == "-" else Path(name).read_bytes()
    except OSError as error:
        raise _UnreadableError(str(error)) from None


def _write(content: bytes) -> None:
    sys.stdout.buffer.write(content)
    sys.stdout.buffer.flush()


def _hand_over(module: str, words: list[str]) -> NoReturn:
    """Become another door of the package, which this one does not know from the inside."""
    sys.stdout.flush()
    os.execv(sys.executable, [sys.executable, "-P", "-m", module, *words])  # noqa: S606 - our own interpreter


if __name__ == "__main__":
    sys.exit(main())
