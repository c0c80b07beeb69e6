"""One profile for every property test: the same examples on every run, and no clock in the verdict.

Look for new examples with `python -m pytest --hypothesis-profile=search`.
"""

from hypothesis import settings

settings.register_profile("suite", derandomize=True, deadline=None)
settings.register_profile("search", deadline=None, max_examples=2_000)
settings.load_profile("suite")
