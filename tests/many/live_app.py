"""The operations for many designs, for a server to serve."""

from loopslack.api.v1_many import MANY_OPERATIONS
from loopslack.app import create_app

app = create_app(operations=MANY_OPERATIONS)
