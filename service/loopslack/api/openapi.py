"""The OpenAPI document as it is served: the committed bytes, read once at start.

`openapi/v1.json` and `openapi/v1.yaml` are the only copies; two links beside the assembler bring them into
the package. How they are made is told in `loopslack.api.document`, which the running service does not import.
"""

from importlib.resources import files

from loopslack.api.reference import Page

_FORMS = (("json", "application/json"), ("yaml", "application/yaml"))


def document_pages() -> tuple[Page, ...]:
    """The pages `/v1/openapi.json` and `/v1/openapi.yaml`, each with the tag of its bytes.

    Raises:
        FileNotFoundError: the package was built without the document.

    """
    folder = files("loopslack.api") / "document"
    return tuple(
        Page(path=f"/v1/openapi.{form}", media_type=media_type, body=(folder / f"v1.{form}").read_bytes())
        for form, media_type in _FORMS
    )
