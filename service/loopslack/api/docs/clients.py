"""The page of the clients: the settings each generator is given and the first call of each, as they are tested.

Must not live here: code of a client; the files stand in `openapi/generators` and are linked into the package.
"""

from importlib.resources import files

from loopslack.api.docs.frame import Section, framed
from loopslack.api.docs.markup import code, joined, listing, tag
from loopslack.api.docs.prose import phrase
from loopslack.api.reference import Page

CLIENTS = {
    "typescript": ("TypeScript", "openapi/generators/typescript.yaml", "openapi/generators/first-call.ts"),
    "python": ("Python", "openapi/generators/python.yaml", "openapi/generators/first_call.py"),
    "kotlin": ("Kotlin", "openapi/generators/kotlin.yaml", "openapi/generators/FirstCall.kt"),
    "swift": ("Swift", "openapi/generators/swift.yaml", "openapi/generators/FirstCall.swift"),
}
"""By key: the language, the generator's settings and the first call, as they lie in the repository."""


def asset(name: str) -> bytes:
    """A file that is served with the documentation or shown in it; FileNotFoundError if it was not packed."""
    return (files("loopslack.api") / "assets" / name).read_bytes()


def clients_page() -> Page:
    """The page `/docs/clients`."""
    sections = [
        Section(
            anchor=key,
            title=language,
            body=joined(
                tag("h3", "First call"),
                tag("p", code(first_call)),
                listing(asset(f"first-call-{key}.txt").decode(), f"First call in {language}"),
                tag("h3", "Settings of the generator"),
                tag("p", code(settings)),
                listing(asset(f"settings-{key}.txt").decode(), f"Settings of the generator for {language}"),
            ),
        )
        for key, (language, settings, first_call) in CLIENTS.items()
    ]
    advice = [
        "Every member and every constant has a name that survives unchanged in all four languages.",
        "Send a question again whenever the network failed: it changes nothing, and the answer is the same.",
        "Pass over members, codes and words you do not know; an answer may gain some within version 1.",
        (
            "An optional member may be sent as `null`, which counts as absent. An answer has no `null`: what it does "
            "not have is absent, which some generators tell apart from null as unset."
        ),
        "Read the verdict before the vessel. `chosenVessel` is absent where the design does not hold.",
        (
            "Streams of lines are left out by these settings: read and write them with any HTTP client. Generated "
            "clients wait for the whole body, and some do not know the media type `application/x-ndjson` at all."
        ),
        "Pages, drawings and PDFs may come as raw content, in place of a file or a text: save the bytes as they are.",
        (
            "Other generators work too, as far as they know OpenAPI 3.1. Where one gives no type for an answer, read "
            "the JSON of the body; where it cannot read the document, ask without one: a question is one `POST`."
        ),
    ]
    sections.append(
        Section(
            anchor="advice",
            title="For every client",
            body=tag("ul", [tag("li", phrase(line)) for line in advice]),
        )
    )
    lead = joined(
        "Generate a client from ",
        code("/v1/openapi.json"),
        (
            " with the settings below, which are part of this project. The first calls compile and are run against the "
            "service before each release, the Swift one is checked for its syntax."
        ),
    )
    return framed("/docs/clients", "Generated clients", lead, sections)
