"""Answers a file of designs on a Dask cluster, for fleets that outgrow one machine.

    pip install dask distributed                    # beside this package, on every machine, in equal versions
    dask scheduler                                  # on one machine
    dask worker tcp://SCHEDULER:8786 --nworkers -1 --nthreads 1
    python designs_on_dask.py tcp://SCHEDULER:8786 IN OUT

IN and OUT are those of `loopslack bulk`, and so are order, checkpoint and resumption: a run that was ended here can
be finished by `loopslack bulk`, and the other way round. Only the crew differs. With `local` in place of the
address, a cluster on this machine is started for the run. One thread for each worker, since a design computes all
the time and the threads of one process would only take turns.
"""

from __future__ import annotations

import argparse
import sys
from collections import deque
from collections.abc import Iterable, Iterator
from pathlib import Path

from distributed import Client, Future, LocalCluster

from loopslack.bulk.blocks import Answered, Block, answer_block
from loopslack.bulk.progress import Progress
from loopslack.bulk.run import answer_file
from loopslack.bulk.target import CannotResumeError, maker
from loopslack.contract.refusals import Refused

BLOCKS_AHEAD = 3
"""Blocks for each thread of the cluster that are out at a time; more would only wait in the workers' memory."""


def answer_alike(made_by: str, head: bytes, block: Block) -> Answered:
    """Answer a block, unless this machine would answer it in another way than the one that asks."""
    if maker() != made_by:
        raise RuntimeError(f"this worker has {maker()}, but the run was begun with {made_by}")
    return answer_block(head, block)


class Cluster:
    """Answers blocks on the workers of a cluster. It may grow and shrink meanwhile; what a lost one had is redone."""

    def __init__(self, client: Client) -> None:
        self._client = client

    def answer(self, head: bytes, blocks: Iterable[Block]) -> Iterator[Answered]:
        """The answers of the blocks in their order, a bounded number of them out at a time."""
        [shared] = self._client.scatter([head], broadcast=True)
        out: deque[Future] = deque()
        for block in blocks:
            out.append(self._client.submit(answer_alike, maker(), shared, block, pure=False))
            while len(out) > BLOCKS_AHEAD * max(1, sum(self._client.nthreads().values())):
                yield out.popleft().result()
        while out:
            yield out.popleft().result()


def main(arguments: list[str] | None = None) -> int:
    """Run it; 0 when every line was dealt with, 2 if it could not begin."""
    parser = argparse.ArgumentParser(
        description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter
    )
    parser.add_argument("cluster", help="address of the scheduler, or `local`")
    parser.add_argument("questions", metavar="IN", type=Path)
    parser.add_argument("answers", metavar="OUT", type=Path)
    asked = parser.parse_args(arguments)
    try:
        with cluster(asked.cluster) as client:
            progress = Progress(sys.stderr, asked.questions.stat().st_size)
            answer_file(asked.questions, asked.answers, Cluster(client), progress)
    except (Refused, CannotResumeError, OSError) as error:
        sys.stderr.write(f"{error}\n")
        return 2
    return 0


def cluster(address: str) -> Client:
    """A client of the cluster at an address, or of one that is started here."""
    if address != "local":
        return Client(address)
    return Client(LocalCluster(threads_per_worker=1, host="127.0.0.1", dashboard_address=None))


if __name__ == "__main__":
    sys.exit(main())
