import pytest

from many.designs import serving


@pytest.fixture(scope="module")
def client():
    with serving() as made:
        yield made
