"""Names and meanings of the words that answers use.

A value that `loopslack.contract` has and this table has not is refused when the document is assembled.
"""

from __future__ import annotations

from loopslack.api.document.vocabulary import NamedUnion, NamedValues

ANSWER_LISTS: tuple[NamedValues, ...] = ()
ANSWER_UNIONS: tuple[NamedUnion, ...] = ()
