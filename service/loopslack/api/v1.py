"""The register of operations of version 1: everything the contract offers, in the order of the document."""

from typing import Any

from loopslack.api.operations import Operation

OPERATIONS: tuple[Operation[Any, Any], ...] = ()
