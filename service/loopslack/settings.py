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

    bind: Annotated[str, Meta(min_length=1, max_length=255)] = "127.0.0.1:8000"
    """Address the server listens on; read here only to warn when a public address is served unguarded."""
    workers: Annotated[int, Meta(ge=1, le=1024)] = 1
    """Worker processes (read from `WEB_CONCURRENCY`); a key's rate is shared out among them."""

    single_body_bytes: Annotated[int, Meta(ge=1_000, le=64_000_000)] = 2_000_000
    """Longest body of a single question."""
    batch_body_bytes: Annotated[int, Meta(ge=1_000, le=256_000_000)] = 8_000_000
    """Longest body of a batch."""
    stream_body_bytes: Annotated[int, Meta(ge=1_000, le=1_000_000_000)] = 32_000_000
    """Longest body of a stream of lines."""
    line_bytes: Annotated[int, Meta(ge=1_000, le=2_000_000)] = 256_000
    """Longest line of a stream."""
    batch_designs: Annotated[int, Meta(ge=1, le=100_000)] = 1_000
    """Most designs in one batch."""
    stock_items: Annotated[int, Meta(ge=1, le=100_000)] = 10_000
    """Most vessels in a caller's stock list."""
    nesting: Annotated[int, Meta(ge=8, le=100)] = 32
    """Deepest nesting of objects and lists in a body."""
    body_seconds: Annotated[float, Meta(ge=0.1, le=3600)] = 60.0
    """Time a body may take to arrive."""

    deadline_seconds: Annotated[float, Meta(ge=0.1, le=600)] = 20.0
    """Time a costly question (course, sheet, batch) may take, waiting included."""
    costly_waiting: Annotated[int, Meta(ge=0, le=1_000)] = 4
    """Costly questions that may wait in a worker while one is computed; further ones are refused with 503."""
    batches_waiting: Annotated[int, Meta(ge=0, le=100)] = 2
    """Batches and streams that may wait in a worker while one runs; further ones are refused with 503."""
    shed_lag_seconds: Annotated[float, Meta(ge=0.02, le=10)] = 0.1
    """Lateness of the event loop from which requests are refused with 503."""

    cors_origins: Annotated[tuple[Annotated[str, Meta(max_length=255)], ...], Meta(max_length=100)] = ()
    """Origins a browser may call from, separated by commas; none by default."""
    keys_file: Annotated[str, Meta(max_length=4096)] = ""
    """File of API keys; without one every caller is served."""
    rate_per_second: Annotated[float, Meta(ge=0, le=1_000_000)] = 0.0
    """Requests a second for each key (or client address, where there are no keys); 0 for no limit."""
    rate_burst: Annotated[int, Meta(ge=1, le=1_000_000)] = 20
    """Requests a caller who was silent may send at once."""

    log_level: Literal["debug", "info", "warning", "error"] = "info"
    """Least serious message that is logged."""
    access_log: bool = True
    """Whether each request is logged (one line, never its body)."""
    tracing: bool = False
    """Whether OpenTelemetry spans are made; needs the `tracing` extra."""


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
