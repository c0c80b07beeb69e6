"""The command `python -m loopslack.bulk`, which is also `loopslack bulk`."""

from __future__ import annotations

import argparse
import os
import signal
import sys
from pathlib import Path
from types import FrameType

from loopslack.bulk.crew import Alone, Crew, LostWorkerError, Processes
from loopslack.bulk.progress import Progress
from loopslack.bulk.run import answer_file
from loopslack.bulk.target import CannotResumeError
from loopslack.contract.refusals import Refused

ALL_HOLD, SOME_DO_NOT_HOLD, NOT_ANSWERED, NOT_FINISHED = range(4)

_DESCRIPTION = """\
Answers a file of designs into a file of answers, in the same order, on several processes.

IN holds one JSON object a line. The first line has `stock` and `defaults`, which may both be absent; every
further line is a design with an `id` of its own. OUT gets a line for each, with its answer or its problem, and a
last line with the counts. A run that was ended goes on where it was when it is started again.
"""
_EXIT_CODES = """\
exit codes: 0 every design holds; 1 some do not; 2 some were refused, or the command or IN cannot be read;
3 not finished, run it again.
"""


def main(arguments: list[str] | None = None) -> int:
    """Run the command; answers the exit code."""
    asked = _parser().parse_args(arguments)
    signal.signal(signal.SIGTERM, _end)
    crew: Crew = Alone() if asked.processes == 1 else Processes(asked.processes)
    try:
        total = asked.questions.stat().st_size
        progress = Progress(None if asked.quiet else sys.stderr, total)
        tally = answer_file(asked.questions, asked.answers, crew, progress, afresh=asked.afresh)
    except Refused as refused:
        _say(f"{asked.questions}, first line: {refused.detail}")
        for fault in refused.faults:
            _say(f"  {fault.pointer or '(all of it)'}: {fault.message}")
        return NOT_ANSWERED
    except (CannotResumeError, ValueError) as error:
        _say(str(error))
        return NOT_ANSWERED
    except (OSError, LostWorkerError) as error:
        _say(f"broken off: {error}. Run it again to go on.")
        return NOT_FINISHED
    except KeyboardInterrupt:
        _say("\nended before the last design. Run it again to go on.")
        return NOT_FINISHED
    if tally.count("refused"):
        return NOT_ANSWERED
    return ALL_HOLD if tally.count("holds") == tally.designs else SOME_DO_NOT_HOLD


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="loopslack bulk",
        description=_DESCRIPTION,
        epilog=_EXIT_CODES,
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("questions", metavar="IN", type=Path, help="the file of designs")
    parser.add_argument("answers", metavar="OUT", type=Path, help="the file of answers")
    parser.add_argument(
        "--processes",
        metavar="N",
        type=_count,
        default=len(os.sched_getaffinity(0)),
        help="how many processes work; by default one for each core",
    )
    parser.add_argument("--afresh", action="store_true", help="overwrite OUT instead of going on with it")
    parser.add_argument("--quiet", action="store_true", help="do not tell how far it has come")
    return parser


def _count(text: str) -> int:
    count = int(text)
    if not 1 <= count <= 1024:
        raise argparse.ArgumentTypeError("from 1 to 1024 processes")
    return count


def _end(_: int, __: FrameType | None) -> None:
    raise KeyboardInterrupt


def _say(text: str) -> None:
    sys.stderr.write(text + "\n")


if __name__ == "__main__":
    sys.exit(main())
