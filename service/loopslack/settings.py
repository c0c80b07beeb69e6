"""Every limit and switch an operator may set, read once from the environment and bounded.

Here lives what the service reads from variables named `LOOPSLACK_...`, with the range each may take. What the
HTTP server reads itself (connections, time limits of a connection) is only named here, so that a misspelt
variable is told from one that belongs to the server. Nothing here acts on a setting.
"""

import re
from collections.abc import Mapping
from difflib import get_close_matches
from typing import Annotated, Literal

import msgspec
from msgspec import Meta, Struct

PREFIX = "LOOPSLACK_"
SERVER_VARIABLES = frozenset(
    {
        "LOOPSLACK_CONNECTIONS",
        "LOOPSLACK_KEEPALIVE_SECONDS",
        "LOOPSLACK_HEAD_SECONDS",
        "LOOPSLACK_READER_SECONDS",
        "LOOPSLACK_METRICS_MADE_BY",
    }
)
"""Variables read by the server's own configuration, not by the application."""

_ORCHESTRATED = re.compile(
    r"LOOPSLACK(_[A-Z0-9_]+)?_(SERVICE_(HOST|PORT(_[A-Z0-9_]+)?)|PORT(_\d+_(TCP|UDP).*)?)"
)
"""What Kubernetes sets for a Service that is itself named loopslack, for instance LOOPSLACK_PORT."""

_LISTS = frozenset({"cors_origins"})


class SettingsError(Exception):
    """A variable of the environment holds a value the service cannot run with; the message names it."""


class Settings(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """The service's settings; the variable of a field is its name in capitals behind `LOOPSLACK_`."""

    bind: Annotated[
        str,
        Meta(
            min_length=1,
            max_length=255,
            description="Address the server listens on; one that is public and unguarded is warned of.",
        ),
    ] = "127.0.0.1:8000"
    workers: Annotated[
        int,
        Meta(
            ge=1,
            le=1024,
            description="Worker processes (read from `WEB_CONCURRENCY`); a key's rate is shared out among them.",
        ),
    ] = 1

    single_body_bytes: Annotated[
        int, Meta(ge=1_000, le=64_000_000, description="Longest body of a single question.")
    ] = 2_000_000
    batch_body_bytes: Annotated[
        int, Meta(ge=1_000, le=256_000_000, description="Longest body of a batch.")
    ] = 8_000_000
    stream_body_bytes: Annotated[
        int, Meta(ge=1_000, le=1_000_000_000, description="Longest body of a stream of lines.")
    ] = 32_000_000
    line_bytes: Annotated[int, Meta(ge=1_000, le=2_000_000, description="Longest line of a stream.")] = (
        256_000
    )
    batch_designs: Annotated[int, Meta(ge=1, le=100_000, description="Most designs in one batch.")] = 1_000
    stream_designs: Annotated[int, Meta(ge=1, le=10_000_000, description="Most designs in one stream.")] = (
        100_000
    )
    stock_items: Annotated[
        int, Meta(ge=1, le=100_000, description="Most vessels in a caller's stock list.")
    ] = 10_000
    nesting: Annotated[
        int, Meta(ge=8, le=100, description="Deepest nesting of objects and lists in a body.")
    ] = 32
    body_seconds: Annotated[float, Meta(ge=0.1, le=3600, description="Time a body may take to arrive.")] = (
        60.0
    )

    deadline_seconds: Annotated[
        float,
        Meta(
            ge=0.1,
            le=600,
            description="Time a costly question (course, sheet) may take, waiting included.",
        ),
    ] = 20.0
    costly_waiting: Annotated[
        int,
        Meta(
            ge=0,
            le=1_000,
            description="Costly questions that may wait in a worker beside the one computed.",
        ),
    ] = 4
    batches_waiting: Annotated[
        int,
        Meta(
            ge=0,
            le=100,
            description="Batches and streams that may wait in a worker beside the one that runs.",
        ),
    ] = 2
    batch_seconds: Annotated[
        float,
        Meta(
            ge=0.1,
            le=86_400,
            description="Time a batch or stream may take, waiting included; the designs left then are refused.",
        ),
    ] = 300.0
    shed_lag_seconds: Annotated[
        float,
        Meta(
            ge=0.02, le=10, description="Lateness of the event loop from which requests are refused with 503."
        ),
    ] = 0.1

    cors_origins: Annotated[
        tuple[Annotated[str, Meta(max_length=255)], ...],
        Meta(
            max_length=100,
            description="Origins a browser may call from, separated by commas; none by default.",
        ),
    ] = ()
    keys_file: Annotated[
        str, Meta(max_length=4096, description="File of API keys; without one every caller is served.")
    ] = ""
    rate_per_second: Annotated[
        float,
        Meta(
            ge=0,
            le=1_000_000,
            description="Requests a second for each key, or client address where there are no keys; 0 for any.",
        ),
    ] = 0.0
    rate_burst: Annotated[
        int, Meta(ge=1, le=1_000_000, description="Requests a caller who was silent may send at once.")
    ] = 20

    log_level: Annotated[
        Literal["debug", "info", "warning", "error"],
        Meta(description="Least serious message that is logged."),
    ] = "info"
    access_log: Annotated[
        bool, Meta(description="Whether each request is logged (one line, never its body).")
    ] = True
    tracing: Annotated[
        bool, Meta(description="Whether OpenTelemetry spans are made; needs the `tracing` extra.")
    ] = False


_VARIABLES = {
    "WEB_CONCURRENCY" if name == "workers" else PREFIX + name.upper(): name
    for name in Settings.__struct_fields__
}


def settings_from(environment: Mapping[str, str]) -> Settings:
    """The settings an environment asks for; an empty variable counts as absent.

    A variable with the service's prefix that nobody reads is refused: a misspelt `LOOPSLACK_KEYS_FILE` would
    otherwise leave the service open without a word.

    Raises:
        SettingsError: a variable is unknown, or its value is outside its range.

    """
    for name in environment:
        if (
            name.startswith(PREFIX)
            and name not in _VARIABLES
            and name not in SERVER_VARIABLES
            and not _ORCHESTRATED.fullmatch(name)
        ):
            near = get_close_matches(name, [*_VARIABLES, *SERVER_VARIABLES], n=1, cutoff=0.7)
            hint = f" Did you mean {near[0]}?" if near else ""
            raise SettingsError(f"{name} is no setting of the service.{hint}")
    wanted = {
        field: _value(variable, field, environment[variable])
        for variable, field in _VARIABLES.items()
        if environment.get(variable)
    }
    settings = Settings(**wanted)  # type: ignore[arg-type] # each value was converted to its field's type
    for origin in settings.cors_origins:
        if not re.fullmatch(r"https?://[A-Za-z0-9.\-\[\]:]+", origin):
            raise SettingsError(
                f"LOOPSLACK_CORS_ORIGINS: {origin!r} is no origin; write scheme, host and port only, "
                "for instance https://app.example, and separate several by commas."
            )
    return settings


def _value(variable: str, field: str, text: str) -> object:
    raw: object = (
        [part.strip() for part in text.split(",") if part.strip()] if field in _LISTS else text.strip()
    )
    try:
        return msgspec.convert(raw, _TYPES[field], strict=False)
    except msgspec.ValidationError as error:
        raise SettingsError(f"{variable}={text!r} will not do: {str(error).split(' - at ')[0]}.") from None


_TYPES = {field.name: field.type for field in msgspec.structs.fields(Settings)}


def settings_table() -> str:
    """Every setting as a row of a table in Markdown, for the documentation."""
    rows = ["| variable | default | bounds | meaning |", "| --- | --- | --- | --- |"]
    names = {field: variable for variable, field in _VARIABLES.items()}
    for field in msgspec.structs.fields(Settings):
        schema = msgspec.json.schema(field.type)
        default = ", ".join(field.default) if isinstance(field.default, tuple) else field.default
        if isinstance(default, bool):
            default = str(default).lower()
        bounds = " to ".join(f"{schema[limit]:.10g}" for limit in ("minimum", "maximum") if limit in schema)
        bounds = bounds or ", ".join(schema.get("enum", ()))
        rows.append(f"| `{names[field.name]}` | {default} | {bounds} | {schema['description']} |")
    return "\n".join(rows)
