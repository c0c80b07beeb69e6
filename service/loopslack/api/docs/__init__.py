"""The documentation at `/docs`: pages made once, at start, out of the contract and the registers it rests on.

`DOCS_PAGES` is all of it: readable without a script, nothing loaded from elsewhere. Must not live here: facts that
another part of the service knows.
"""

from loopslack.api.docs.clients import asset, clients_page
from loopslack.api.docs.codes import code_pages
from loopslack.api.docs.contract import contract
from loopslack.api.docs.frame import ASSETS, REVALIDATED
from loopslack.api.docs.knowledge import knowledge_pages
from loopslack.api.docs.operations import operation_pages, question_files
from loopslack.api.docs.schemas import schema_pages
from loopslack.api.docs.start import FIRST_QUESTION, start_page
from loopslack.api.docs.tryout import try_page
from loopslack.api.reference import Page

_ASSETS = {
    "style.css": "text/css; charset=utf-8",
    "try.js": "text/javascript; charset=utf-8",
    "answer.js": "text/javascript; charset=utf-8",
    "question.js": "text/javascript; charset=utf-8",
    "mark.svg": "image/svg+xml",
}


def _pages() -> tuple[Page, ...]:
    told = contract()
    assets = (
        Page(path=f"{ASSETS}/{name}", media_type=media_type, body=asset(name), cache_control=REVALIDATED)
        for name, media_type in _ASSETS.items()
    )
    return (
        start_page(told),
        try_page(told),
        *operation_pages(told),
        *question_files(told),
        Page(
            path=FIRST_QUESTION,
            media_type="application/json",
            body=asset("first-question.json"),
            cache_control=REVALIDATED,
        ),
        *schema_pages(told),
        clients_page(),
        *code_pages(told),
        *knowledge_pages(told),
        *assets,
    )


DOCS_PAGES: tuple[Page, ...] = _pages()
"""Every page and asset of the documentation."""
