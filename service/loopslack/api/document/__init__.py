"""The OpenAPI document, assembled from what the service really reads and answers.

Lives here: the way from structs, operations and problem types to one OpenAPI 3.1 document, and the words that
give every closed list of values its name. The structs themselves live in `loopslack.contract`, the operations
in `loopslack.api.operations`. `python -m loopslack.api.document` writes `openapi/v1.json` and
`openapi/v1.yaml`; the service serves those bytes (`loopslack.api.openapi`) and a test holds them equal to
what this package assembles.

Must not live here: HTTP, physics, and anything needed to answer a question. The running service never imports
this package.
"""
