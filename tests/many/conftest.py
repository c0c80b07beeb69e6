import pytest

from many.service import serving


@pytest.fixture(scope="module")
def client():
    with serving() as made:
        yield made
