"""One profile for every property test: the same examples on every run, and no clock in the verdict.

Look for new examples with `python -m pytest --hypothesis-profile=search`.
"""

import pytest
from hypothesis import settings

from loopslack.observability import READINESS

settings.register_profile("suite", derandomize=True, deadline=None)
settings.register_profile("search", deadline=None, max_examples=2_000)
settings.load_profile("suite")


@pytest.fixture(autouse=True)
def not_stopping() -> None:
    """A process has one readiness; a service that one test stopped would leave those of the next ones stopping."""
    READINESS.draining = False
