"""Forks the side process of a worker, ends it, and begins another: a small process that does nothing else.

A worker must not fork by itself while it serves: it has an event loop and callers' connections, and neither should
be in two processes. An interpreter started afresh would take a second and 50 MB. So each worker forks a nursery before
it serves, and the nursery, which stays as it was, forks whenever it is told to: a few milliseconds, and memory
shared until it is written. It ends with its worker, however that ends, and takes what it forked with it.

Nothing here knows what a side process does. It may be something that a fork breaks, if its library has begun threads in
the process that is forked: they are missing in the new one, which waits for them until its deadline. Who makes a
nursery says when that is so, and it then refuses to fork.
"""

import asyncio
import gc
import os
import signal
import socket
import struct
from collections.abc import Callable, Iterable
from contextlib import suppress
from functools import partial
from math import inf
from pathlib import Path
from typing import NoReturn

Work = Callable[[bytes], bytes]
"""What a side process does: an answer for a message."""

NICENESS = 10
"""How far a side process stands back: short questions wake up to a free core, long ones take what is left."""

_Life = Callable[[socket.socket, Callable[[], Work]], None]

HEAD = struct.Struct(">Id")
"""Before a message: its length, and the seconds after which the side process ends for want of an answer."""

ANSWER_HEAD = struct.Struct(">I?")
"""Before an answer: its length, and whether the side process is worn out and another should be begun for the next."""

_ORDER = struct.Struct(">I")
_NOBODY = 0
_LEFT_TO_OTHERS = (
    signal.SIGINT,
    signal.SIGTERM,
    signal.SIGQUIT,
    signal.SIGHUP,
    signal.SIGUSR1,
    signal.SIGUSR2,
    signal.SIGABRT,
)
"""Signals that reach a whole group of processes; the worker decides what they mean, its end is ours."""


class NurseryLostError(Exception):
    """The nursery has been ended from outside, and this worker can begin no side process any more."""


class Nursery:
    """The nursery as its worker sees it: begins a side process, or ends it. There is one at a time."""

    def __init__(
        self,
        prepare: Callable[[], Work],
        too_late: Callable[[], str] = str,
        most_grown: float = inf,
    ) -> None:
        self._prepare = prepare
        self._most_grown = most_grown
        self._too_late = too_late
        self._control: socket.socket | None = None
        self._process = 0
        self._begun = 0

    def start(self) -> socket.socket:
        """Fork the nursery, unless that has been done; before the event loop runs where there is a choice.

        Raises:
            RuntimeError: it is too late; the text says why.

        """
        if self._control is not None:
            return self._control
        reason = self._too_late()
        if reason:
            raise RuntimeError(reason)
        ours, theirs = socket.socketpair()
        self._process = os.fork()
        if self._process == 0:
            _alone(theirs, partial(_tend, most_grown=self._most_grown), self._prepare)
        theirs.close()
        ours.setblocking(False)
        self._control = ours
        return ours

    async def begin(self) -> socket.socket:
        """Begin a side process, ending the one before if it still runs, and return the connection to it.

        Raises:
            NurseryLostError: it cannot be done, nor will it be.

        """
        control = self.start()
        self._begun += 1
        loop = asyncio.get_running_loop()
        arrived: asyncio.Future[socket.socket] = loop.create_future()
        loop.add_reader(control, _take, control, self._begun, arrived)
        try:
            control.send(_ORDER.pack(self._begun))
            return await arrived
        except OSError as error:
            raise NurseryLostError(str(error)) from None
        finally:
            loop.remove_reader(control)

    def end(self) -> None:
        """End the side process, whatever it is doing."""
        if self._control is not None:
            with suppress(OSError):
                self._control.send(_ORDER.pack(_NOBODY))

    def close(self) -> None:
        """End the side process and the nursery."""
        if self._control is not None:
            self._control.close()
            self._control = None
            with suppress(ChildProcessError):
                os.waitpid(self._process, 0)


def _take(control: socket.socket, number: int, arrived: "asyncio.Future[socket.socket]") -> None:
    """Take the connection to a side process; one that was asked for by a request since given up is closed."""
    try:
        told, handles, _, _ = socket.recv_fds(control, _ORDER.size, 1)
        if not told:
            raise ConnectionResetError("the nursery has ended")
    except BlockingIOError:
        return
    except OSError as error:
        if not arrived.done():
            arrived.set_exception(error)
        return
    connection = socket.socket(fileno=handles[0])
    if _ORDER.unpack(told) != (number,) or arrived.done():
        connection.close()
    else:
        arrived.set_result(connection)


def _alone(kept: socket.socket, live: _Life, prepare: Callable[[], Work]) -> NoReturn:
    """Live in a process just forked, with nothing of its parent but its memory, and end the process."""
    code = 1
    try:
        gc.freeze()  # an inherited object that was collected would close a handle that is ours by then
        signal.set_wakeup_fd(-1)
        for number in _LEFT_TO_OTHERS:
            signal.signal(number, signal.SIG_IGN)
        for number in (signal.SIGCHLD, signal.SIGALRM):
            signal.signal(number, signal.SIG_DFL)
        _close_all_but({0, 1, 2, kept.fileno()})
        live(kept, prepare)
        code = 0
    except OSError:
        code = 0  # the worker has gone
    finally:
        os._exit(code)


def _close_all_but(kept: Iterable[int]) -> None:
    """Close what was inherited: a connection held here would stay open after the worker has closed it."""
    for handle in [int(entry.name) for entry in Path("/dev/fd").iterdir()]:
        if handle not in kept:
            with suppress(OSError):
                os.close(handle)


def _tend(control: socket.socket, prepare: Callable[[], Work], most_grown: float) -> None:
    """The nursery itself: do as told until the worker has gone, then end what was begun."""
    process = 0
    try:
        while order := control.recv(_ORDER.size):
            _end(process)
            process = 0
            if order == _ORDER.pack(_NOBODY):
                continue
            ours, theirs = socket.socketpair()
            process = os.fork()
            if process == 0:
                _alone(theirs, partial(_serve, most_grown=most_grown), prepare)
            theirs.close()
            socket.send_fds(control, [order], [ours.fileno()])
            ours.close()
    finally:
        _end(process)


def _end(process: int) -> None:
    """End a process that is still ours, so that its number cannot have become another's."""
    if process:
        os.kill(process, signal.SIGKILL)
        os.waitpid(process, 0)


def _serve(connection: socket.socket, prepare: Callable[[], Work], most_grown: float) -> None:
    """The side process itself: answer messages until the worker closes the connection.

    A message that takes too long ends the process by the system's own alarm, also where nobody is left to end it.
    """
    os.nice(NICENESS)
    at_first = _memory()
    work = prepare()
    with connection.makefile("rwb") as stream:
        while len(head := stream.read(HEAD.size)) == HEAD.size:
            length, seconds = HEAD.unpack(head)
            signal.setitimer(signal.ITIMER_REAL, seconds)
            answer = work(stream.read(length))
            stream.write(ANSWER_HEAD.pack(len(answer), _memory() - at_first > most_grown))
            stream.write(answer)
            stream.flush()
            signal.setitimer(signal.ITIMER_REAL, 0.0)


def _memory() -> int:
    """The resident size of this process in bytes; nothing where the system does not tell."""
    try:
        return int(Path("/proc/self/statm").read_text(encoding="ascii").split()[1]) * os.sysconf(
            "SC_PAGE_SIZE"
        )
    except OSError:
        return 0
