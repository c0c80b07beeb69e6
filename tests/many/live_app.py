"""The service with the operations for many designs, whatever else the register holds."""

from loopslack.api.v1 import OPERATIONS
from loopslack.api.v1_many import MANY_OPERATIONS
from loopslack.app import create_app

_ours = {operation.operation_id for operation in MANY_OPERATIONS}
app = create_app(operations=(*MANY_OPERATIONS, *(one for one in OPERATIONS if one.operation_id not in _ours)))
