"""What stands before every request: this machine, this page, this token, in bounded size and number."""

from __future__ import annotations

import hmac
import time
from collections import OrderedDict
from dataclasses import dataclass

from starlette.requests import Request
from starlette.responses import PlainTextResponse, Response

LARGEST_BODY = 64_000
"""Bytes; a case of forty places is below 8000."""
PER_SECOND, BURST = 60.0, 120.0
"""Requests of one page: a steady rate, and how many may come at once."""
MOST_PAGES = 64
"""Pages whose rate is remembered."""
HEADERS = {
    "Content-Security-Policy": (
        "default-src 'none'; script-src 'self'; style-src 'self'; connect-src 'self'; img-src 'self' data:; "
        "base-uri 'none'; form-action 'none'; frame-ancestors 'none'"
    ),
    "Cache-Control": "no-store",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cross-Origin-Resource-Policy": "same-origin",
    "Referrer-Policy": "no-referrer",
    "X-Content-Type-Options": "nosniff",
}
"""Of every answer."""


class TooLarge(Exception):
    """The request's body is larger than allowed."""


@dataclass
class Rates:
    """A bucket of requests for each page, filled again as time goes."""

    def __post_init__(self) -> None:
        self._buckets: OrderedDict[str, tuple[float, float]] = OrderedDict()

    def take(self, page: str, now: float) -> bool:
        """Take one request from the page's bucket; False where it is empty."""
        left, before = self._buckets.pop(page, (BURST, now))
        left = min(BURST, left + PER_SECOND * (now - before))
        self._buckets[page] = (left - 1.0 if left >= 1.0 else left, now)
        while len(self._buckets) > MOST_PAGES:
            self._buckets.popitem(last=False)
        return left >= 1.0


@dataclass(frozen=True)
class Guard:
    """The checks of one server.

    Parameters
    ----------
    token : str
        The page carries it; another program on this machine does not know it.
    port : int
    rates : Rates
    """

    token: str
    port: int
    rates: Rates

    def refusal(self, request: Request, open_file: bool) -> Response | None:
        """Return why a request is refused, None where it is not.

        Parameters
        ----------
        request : Request
        open_file : bool
            Whether it asks for one of the page's own files, which hold nothing of the user's.
        """
        hosts = {f"127.0.0.1:{self.port}", f"localhost:{self.port}"}
        # a name that another page's owner has pointed here would come with that name
        if request.headers.getlist("host") != [request.headers.get("host")] or request.headers["host"] not in hosts:
            return _refused(421, "This server answers to 127.0.0.1 only.")
        origin = request.headers.get("origin")
        if request.method == "POST" and origin is None:
            return _refused(403, "A change must say which page it comes from.")
        if origin is not None and origin not in {f"http://{host}" for host in hosts}:
            return _refused(403, "Only the page of this server may ask.")
        if request.headers.get("sec-fetch-site", "none") not in {"same-origin", "none"}:
            return _refused(403, "Only the page of this server may ask.")
        if open_file:
            return None
        given = request.headers.get("x-faying-token") or request.query_params.get("token", "")
        if not hmac.compare_digest(given.encode(), self.token.encode()):
            return _refused(
                403,
                "The address has no token, or an old one. Use the address `faying try` printed; what follows the # in "
                "an old address may be added to it.",
            )
        if not self.rates.take(page_of(request), time.monotonic()):
            return _refused(429, "Too many requests from this page.", {"Retry-After": "1"})
        return None


def page_of(request: Request) -> str:
    """Return the name a page gave itself."""
    return request.headers.get("x-faying-page", "")[:40]


async def bounded_body(request: Request) -> bytes:
    """Return the body, giving up once it is larger than allowed.

    Raises
    ------
    TooLarge
    """
    length = request.headers.get("content-length", "0")
    if not length.isdecimal() or int(length) > LARGEST_BODY:
        raise TooLarge
    body = bytearray()
    async for chunk in request.stream():
        body += chunk
        if len(body) > LARGEST_BODY:
            raise TooLarge
    return bytes(body)


def _refused(status: int, words: str, headers: dict[str, str] | None = None) -> Response:
    # the body was not read: the connection is not used again
    return PlainTextResponse(words + "\n", status, {**HEADERS, "Connection": "close", **(headers or {})})
