"""One profile for every property test: the same examples on every run, and no clock in the verdict.

Look for new examples with `python -m pytest --hypothesis-profile=search`.
"""

import os
import traceback
from collections.abc import Callable, Iterator

import pytest
from hypothesis import settings

from loopslack.observability import READINESS
from loopslack.sheet.pdf import typesetter

settings.register_profile("suite", derandomize=True, deadline=None)
settings.register_profile("search", deadline=None, max_examples=2_000)
settings.load_profile("suite")


@pytest.fixture(autouse=True)
def not_stopping() -> None:
    """A process has one readiness; a service that one test stopped would leave those of the next ones stopping."""
    READINESS.draining = False


@pytest.fixture(autouse=True)
def nothing_was_typeset_here() -> Iterator[None]:
    """The typesetter begins threads, which a process forked later lacks: the service would wait for them in vain."""
    yield
    typeset = typesetter.cache_info().currsize
    typesetter.cache_clear()
    assert not typeset, "a test that sets a PDF itself needs the mark `apart`"


@pytest.hookimpl(tryfirst=True)
def pytest_pyfunc_call(pyfuncitem: pytest.Function) -> bool | None:
    """Run a test with the mark `apart` in a process of its own, with all that its fixtures have prepared."""
    if pyfuncitem.get_closest_marker("apart") is None:
        return None
    names = pyfuncitem._fixtureinfo.argnames
    arguments = {name: pyfuncitem.funcargs[name] for name in names}
    told = _told_apart(lambda: pyfuncitem.obj(**arguments))
    if told:
        pytest.fail(told, pytrace=False)
    return True


def _told_apart(test: Callable[[], object]) -> str:
    """What a test says when it fails in a process forked for it, or nothing."""
    ours, theirs = os.pipe()
    process = os.fork()
    if process == 0:
        told = "the test ended its process"
        try:
            test()
            told = ""
        except BaseException:  # noqa: BLE001 - whatever it is, it is told by the process that reports
            told = traceback.format_exc()
        finally:
            with os.fdopen(theirs, "w", encoding="utf-8") as line:
                line.write(told)
            os._exit(0)
    os.close(theirs)
    with os.fdopen(ours, encoding="utf-8") as line:
        told = line.read()
    _, status = os.waitpid(process, 0)
    return told or (f"the process of the test ended with status {status}" if status else "")
