"""Who may call and how often: API keys from a file, and a rate for each key. Both are off unless configured.

Keys are long random texts, so a plain SHA-256 of each is kept: a slow hash protects guessable passwords,
which these are not. The file is read again when it changes: keys can be added and withdrawn while serving.
Each worker counts for itself; the rate is shared out among the workers.
"""

import hashlib
import hmac
import ipaddress
import logging
import secrets
import time
import tomllib
from collections import OrderedDict
from pathlib import Path
from typing import Annotated

import msgspec
from msgspec import Meta, Struct

from loopslack.api.asgi import ASGIApp, Receive, Scope, Send
from loopslack.api.reading import header
from loopslack.api.record import note_of
from loopslack.api.wrappers import refuse
from loopslack.contract.refusals import Refused
from loopslack.observability import count_refusal
from loopslack.settings import Settings

_logger = logging.getLogger("loopslack.guard")
_OPEN_UNDER_V1 = frozenset({"/v1/openapi.json", "/v1/openapi.yaml"})

MOST_BUCKETS = 10_000
"""Callers whose rate is remembered; the one silent for longest is forgotten first."""

SECONDS_BETWEEN_LOOKS = 1.0
"""How often at most the keys file is looked at for a change."""


class Key(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """One caller's key: its name for the log, the hash of the key, and its own rate if it has one."""

    name: Annotated[str, Meta(min_length=1, max_length=64, pattern=r"^[A-Za-z0-9._-]+$")]
    sha256: Annotated[str, Meta(pattern=r"^[0-9a-f]{64}$")]
    allowed: bool = True
    rate_per_second: Annotated[float, Meta(gt=0, le=1_000_000)] | None = None
    rate_burst: Annotated[int, Meta(ge=1, le=1_000_000)] | None = None


class _KeysFile(Struct, frozen=True, forbid_unknown_fields=True):
    key: Annotated[list[Key], Meta(min_length=1, max_length=1_000)]


class KeysError(Exception):
    """The keys file cannot be used; the message says why."""


def new_key(name: str) -> tuple[str, str]:
    """A new key and the entry of the keys file that admits it; the key itself is kept nowhere."""
    key = secrets.token_urlsafe(32)
    return key, f'[[key]]\nname = "{name}"\nsha256 = "{hashlib.sha256(key.encode()).hexdigest()}"\n'


def read_keys(path: Path) -> tuple[Key, ...]:
    """The keys of a file.

    Raises:
        KeysError: the file is absent, not TOML, or names a key twice.

    """
    try:
        keys = msgspec.convert(tomllib.loads(path.read_text(encoding="utf-8")), _KeysFile).key
    except (OSError, ValueError) as error:
        raise KeysError(f"keys file {path}: {error}") from None
    if len({key.name for key in keys}) < len(keys) or len({key.sha256 for key in keys}) < len(keys):
        raise KeysError(f"keys file {path}: two entries share a name or a key")
    return tuple(keys)


class Keys:
    """The keys of a file, read again when it changes. A file gone bad leaves the old keys valid."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._seen = self._state()
        self._looked = time.monotonic()
        self._keys = read_keys(path)

    def find(self, presented: str) -> Key | None:
        """The key a caller presents. All are compared in full, so that time tells nothing of a near miss."""
        if time.monotonic() - self._looked > SECONDS_BETWEEN_LOOKS:
            self._look()
        digest = hashlib.sha256(presented.encode()).hexdigest()
        found = None
        for key in self._keys:
            if hmac.compare_digest(key.sha256, digest):
                found = key
        return found

    def _look(self) -> None:
        self._looked = time.monotonic()
        state = self._state()
        if state == self._seen:
            return
        self._seen = state
        try:
            self._keys = read_keys(self._path)
            _logger.warning("keys read again", extra={"keys": len(self._keys)})
        except KeysError as error:
            _logger.error("keys file not usable, keeping the keys read before", extra={"reason": str(error)})  # noqa: TRY400 - the message says it all

    def _state(self) -> tuple[int, int, int]:
        try:
            status = self._path.stat()
        except OSError:
            return (0, 0, 0)
        return (status.st_ino, status.st_mtime_ns, status.st_size)


class Bucket:
    """A token bucket: so many requests at once, refilled at a rate."""

    __slots__ = ("_burst", "_filled", "_rate", "_tokens")

    def __init__(self, rate: float, burst: float, now: float) -> None:
        self._rate = rate
        self._burst = burst
        self._tokens = burst
        self._filled = now

    def take(self, now: float) -> float:
        """Take a token: 0 if there was one, else the seconds until there will be."""
        self._tokens = min(self._burst, self._tokens + max(0.0, now - self._filled) * self._rate)
        self._filled = now
        if self._tokens >= 1:
            self._tokens -= 1
            return 0.0
        return (1 - self._tokens) / self._rate


class Guard:
    """Asks for a key and keeps callers to their rate; only in place where one of the two is configured."""

    def __init__(self, app: ASGIApp, settings: Settings) -> None:
        self.app = app
        self._keys = Keys(Path(settings.keys_file)) if settings.keys_file else None
        self._settings = settings
        self._buckets: OrderedDict[str, Bucket] = OrderedDict()

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Let a caller through who may pass."""
        if scope["type"] == "http" and is_guarded(scope):
            try:
                self._admit(scope)
            except Refused as refused:
                await refuse(refused, scope, receive, send)
                return
        await self.app(scope, receive, send)

    def _admit(self, scope: Scope) -> None:
        if self._keys is None:
            address = (scope["client"] or ("unknown", 0))[0]
            self._pace(address, self._settings.rate_per_second, self._settings.rate_burst)
            return
        key = self._keys.find(_presented(scope))
        if key is None:
            count_refusal("key")
            raise Refused(
                "key-missing",
                "The service asks for an API key, and none it knows was sent.",
                headers={"WWW-Authenticate": 'Bearer realm="loopslack"'},
            )
        note_of(scope).caller = key.name
        if not key.allowed:
            count_refusal("key")
            raise Refused("key-refused", f"The key {key.name} has been switched off.")
        rate = key.rate_per_second or self._settings.rate_per_second
        self._pace(key.name, rate, key.rate_burst or self._settings.rate_burst)

    def _pace(self, caller: str, rate: float, burst: int) -> None:
        if not rate:
            return
        now = time.monotonic()
        bucket = self._buckets.get(caller)
        if bucket is None:
            share = self._settings.workers
            bucket = self._buckets[caller] = Bucket(rate / share, max(1.0, burst / share), now)
            if len(self._buckets) > MOST_BUCKETS:
                self._buckets.popitem(last=False)
        self._buckets.move_to_end(caller)
        wait = bucket.take(now)
        if wait:
            count_refusal("rate")
            seconds = str(int(wait) + 1)
            raise Refused(
                "too-many-requests", "The rate allowed is used up.", headers={"Retry-After": seconds}
            )


def is_guarded(scope: Scope) -> bool:
    """Whether a request needs admission: operations do; their description, probes and preflights do not."""
    path = scope["path"]
    return path.startswith("/v1/") and path not in _OPEN_UNDER_V1 and scope["method"] != "OPTIONS"


def _presented(scope: Scope) -> str:
    scheme, _, key = (header(scope, b"authorization") or "").partition(" ")
    return key.strip() if scheme.lower() == "bearer" else ""


def is_guarding(settings: Settings) -> bool:
    """Whether keys or a rate are configured."""
    return bool(settings.keys_file) or settings.rate_per_second > 0


def warn_if_open(settings: Settings) -> bool:
    """Say loudly that anybody who reaches this address is served without limit, where that is so."""
    if is_guarding(settings) or not is_public(settings.bind):
        return False
    _logger.warning(
        "SERVING A PUBLIC ADDRESS WITHOUT KEYS AND WITHOUT A RATE: anyone who reaches it is served without "
        "limit. Set LOOPSLACK_KEYS_FILE or LOOPSLACK_RATE_PER_SECOND, or bind 127.0.0.1.",
        extra={"bind": settings.bind},
    )
    return True


def is_public(bind: str) -> bool:
    """Whether an address to listen on can be reached from another machine."""
    for one in bind.split(","):
        if one.strip().startswith(("unix:", "fd://")):
            continue
        host = one.strip().rpartition(":")[0].strip("[]") if ":" in one else one.strip()
        try:
            public = not ipaddress.ip_address(host).is_loopback
        except ValueError:
            public = host != "localhost"
        if public:
            return True
    return False
