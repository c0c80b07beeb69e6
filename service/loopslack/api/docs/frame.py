"""What every page has around its content: head, navigation, headings with anchors, and its headers.

No page takes anything from elsewhere: style, script and drawing are served by the service itself, and the
security policy forbids the rest. Must not live here: content.
"""

from collections.abc import Sequence

from msgspec import Struct

from loopslack.api.docs.markup import Html, breakable, disclosure, joined, link, tag
from loopslack.api.reference import Page
from loopslack.contract.writing.shared import CONTRACT_VERSION

PAGES = (
    ("/docs", "Start"),
    ("/docs/try", "Try it"),
    ("/docs/operations", "Operations"),
    ("/docs/schemas", "Schemas"),
    ("/docs/clients", "Clients"),
    ("/docs/problems", "Problems"),
    ("/docs/checks", "Checks"),
    ("/docs/rules", "Rules"),
    ("/docs/assumptions", "Assumptions"),
    ("/docs/units", "Units"),
    ("/docs/sources", "Sources"),
)
"""What the navigation lists, in the order a newcomer needs it."""

ASSETS = "/docs/assets"
REVALIDATED = "no-cache"
"""Pages and assets of one version belong together, so a browser asks each time and is told in a few bytes."""

_MANY = 24
"""Entries of a page from which they are listed only when asked for."""

_LOADS = "style-src 'self'; img-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'"
_PURE = "require-trusted-types-for 'script'; trusted-types 'none'"
STATIC_POLICY = f"default-src 'none'; {_LOADS}; {_PURE}"
SCRIPTED_POLICY = f"default-src 'none'; script-src 'self'; connect-src 'self'; {_LOADS}; {_PURE}"


class Section(Struct, frozen=True, kw_only=True):
    """A part of a page under its own heading and anchor."""

    anchor: str
    title: str
    body: Html
    listed: bool = True


def framed(
    path: str,
    title: str,
    lead: object,
    sections: Sequence[Section],
    *,
    script: str | None = None,
    contents: bool = True,
) -> Page:
    """A page of the documentation. `script` names an asset that the page runs."""
    main = tag(
        "main",
        tag("h1", title),
        tag("p", lead, class_="lead"),
        _contents(sections) if contents and len(sections) > 2 else None,
        [
            tag(
                "section",
                tag("h2", breakable(part.title), id=part.anchor),
                part.body,
                aria_labelledby=part.anchor,
            )
            for part in sections
        ],
        id="content",
        tabindex="-1",
    )
    body = tag(
        "body",
        _SIGNS,
        tag("a", "Skip to the content", href="#content", class_="skip"),
        tag("div", _masthead(), _navigation(path), main, _foot(), class_="sheet"),
    )
    html = tag("html", _head(title, script), body, lang="en")
    return Page(
        path=path,
        media_type="text/html; charset=utf-8",
        body=f"<!doctype html>\n{html}\n".encode(),
        cache_control=REVALIDATED,
        headers=(
            (b"content-security-policy", (SCRIPTED_POLICY if script else STATIC_POLICY).encode()),
            (b"content-language", b"en"),
        ),
    )


def _head(title: str, script: str | None) -> Html:
    return tag(
        "head",
        tag("meta", charset="utf-8"),
        tag("title", f"{title} - Loopslack"),
        tag("meta", name="viewport", content="width=device-width, initial-scale=1"),
        tag("meta", name="color-scheme", content="light dark"),
        tag("link", rel="icon", href=f"{ASSETS}/mark.svg", type="image/svg+xml"),
        tag("link", rel="stylesheet", href=f"{ASSETS}/style.css"),
        tag("script", src=f"{ASSETS}/{script}", type="module") if script else None,
    )


def _masthead() -> Html:
    name = tag("a", sign("mark"), tag("span", "Loopslack"), href="/docs", class_="name")
    version = tag("span", f"contract {CONTRACT_VERSION}", class_="version")
    return tag("header", name, version, class_="masthead")


def _navigation(path: str) -> Html:
    items = []
    for where, label in PAGES:
        current = None
        if where == path:
            current = "page"
        elif where != "/docs" and path.startswith(f"{where}/"):
            current = "true"
        items.append(tag("li", tag("a", label, href=where, aria_current=current)))
    return tag("nav", tag("ul", items), aria_label="Documentation", class_="run")


def _contents(sections: Sequence[Section]) -> Html:
    entries = [
        tag("li", link(f"#{part.anchor}", tag("span", part.title))) for part in sections if part.listed
    ]
    listed = tag("ol", entries)
    if len(entries) > _MANY:
        listed = disclosure(f"On this page: {len(entries)} entries", listed)
    return tag("nav", listed, aria_label="On this page", class_="contents")


def _foot() -> Html:
    return tag(
        "footer",
        tag(
            "p",
            "The contract itself: ",
            link("/v1/openapi.json", "/v1/openapi.json"),
            " and ",
            link("/v1/openapi.yaml", "/v1/openapi.yaml"),
            ". Local codes and a licensed installer decide; no calculation replaces them.",
        ),
    )


def sign(name: str) -> Html:
    """One of the signs, beside the word that says the same."""
    return tag("svg", tag("use", href=f"#sign-{name}"), class_="sign", aria_hidden="true", focusable="false")


def verdict_plate(word: str) -> Html:
    """A verdict as a sign and its word; told apart by shape, not by colour alone."""
    return tag("span", sign(word), tag("span", word), class_="verdict", data_verdict=word)


def _symbol(name: str, drawing: str) -> Html:
    return tag("symbol", Html(drawing), id=f"sign-{name}", viewBox="0 0 24 24")


# Drawn for this documentation: an octagon to stop, a ring with a tick, half a disc, a broken ring, and a collector
# over its vessel.
_SIGNS = tag(
    "svg",
    joined(
        _symbol(
            "holds",
            '<circle cx="12" cy="12" r="10" class="line"/><path d="M7 12.5l3.4 3.6L17.2 8.4" class="line"/>',
        ),
        _symbol(
            "does-not-hold",
            '<path d="M8 2h8l6 6v8l-6 6H8l-6-6V8z" class="solid"/><path d="M8 8l8 8M16 8l-8 8" class="cut"/>',
        ),
        _symbol(
            "favourable-only",
            '<circle cx="12" cy="12" r="10" class="line"/><path d="M12 2a10 10 0 0 0 0 20z" class="solid"/>',
        ),
        _symbol(
            "not-assessed",
            '<circle cx="12" cy="12" r="10" class="line dashed"/>'
            '<path d="M9 9.5a3 3 0 1 1 4.4 2.7c-1 .5-1.4 1-1.4 2" class="line"/>'
            '<circle cx="12" cy="17.4" r="1.3" class="solid"/>',
        ),
        _symbol("not-applicable", '<path d="M5 12h14" class="line"/>'),
        _symbol(
            "mark",
            '<path d="M5 3h14v6H5z" class="line"/><path d="M9 3v6M12 3v6M15 3v6" class="thin"/>'
            '<path d="M5 6H2v11h5M19 6h3v11h-5" class="line"/><circle cx="12" cy="17" r="5" class="line"/>'
            '<path d="M7.4 18.6h9.2" class="thin"/>',
        ),
    ),
    class_="signs",
    aria_hidden="true",
    focusable="false",
)
