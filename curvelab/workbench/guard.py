"""Who may ask: this computer's page and programs; every answer says what the page may load.

A page from elsewhere that the browser also shows must neither read nor change anything: its ``Origin`` is another, and
a name it lets point at this computer is not the ``Host`` that is served.
"""

import hmac
import ipaddress
from collections.abc import Iterable
from dataclasses import dataclass
from http.cookies import CookieError, SimpleCookie

from starlette.datastructures import URL, Headers, MutableHeaders
from starlette.responses import JSONResponse, RedirectResponse, Response
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from curvelab.workbench.failures import Refused, status_of, told

COOKIE = "curvelab_token"
HEADER = "x-curvelab"
"""State changes carry it: a form or link of another page cannot."""

SAFE = ("GET", "HEAD", "OPTIONS")

POLICY = "; ".join(
    (
        "default-src 'none'",
        "script-src 'self'",
        "style-src 'self'",
        "img-src 'self' data: blob:",
        "connect-src 'self'",
        "form-action 'none'",
        "base-uri 'none'",
        "frame-ancestors 'none'",
    )
)
SAID = {
    "content-security-policy": POLICY,
    "x-content-type-options": "nosniff",
    "referrer-policy": "no-referrer",
    "cross-origin-opener-policy": "same-origin",
    "cross-origin-resource-policy": "same-origin",
    "permissions-policy": "camera=(), microphone=(), geolocation=()",
}


@dataclass(frozen=True, kw_only=True, slots=True)
class Door:
    """Where is served: the names by which it may be asked, and the token that is needed, None on loopback."""

    hosts: frozenset[str]
    token: str | None = None


def loopback_door(port: int) -> Door:
    """The door of a server that only this computer reaches."""
    return Door(hosts=frozenset(with_port(("127.0.0.1", "localhost", "[::1]"), port)))


def with_port(names: Iterable[str], port: int) -> Iterable[str]:
    """Names as the ``Host`` header writes them."""
    return (f"{name}:{port}" for name in names)


class Guard:
    """Refuses requests before anything of them is looked at, and adds the policy to every answer."""

    def __init__(self, app: ASGIApp, door: Door) -> None:
        self._app = app
        self._door = door

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Answer one request."""
        if scope["type"] != "http":
            await self._app(scope, receive, send)
            return

        async def send_with_policy(message: Message) -> None:
            if message["type"] == "http.response.start":
                headers = MutableHeaders(scope=message)
                for name, value in SAID.items():
                    headers.setdefault(name, value)
                headers.setdefault("cache-control", "no-store")
            await send(message)

        answer = self._answer(scope)
        await (answer or self._app)(scope, receive, send_with_policy)

    def _answer(self, scope: Scope) -> Response | None:
        """What a request is answered at the door; None where it may pass."""
        headers = Headers(scope=scope)
        try:
            self._refuse_strangers(scope["method"], headers)
            return self._let_in(scope, headers)
        except Refused as error:
            return JSONResponse(told(error), status_of(error))

    def _refuse_strangers(self, method: str, headers: Headers) -> None:
        hosts = headers.getlist("host")
        if len(hosts) != 1 or not self._is_ours(hosts[0].lower()):
            raise Refused("This address is not the workbench's", "", "Use the address it printed when it started")
        origin = headers.get("origin")
        if origin is not None and origin.lower() != f"http://{hosts[0].lower()}":
            raise Refused("A page from elsewhere may not use the workbench")
        if headers.get("sec-fetch-site", "same-origin") not in ("same-origin", "none"):
            raise Refused("A page from elsewhere may not use the workbench")
        if method not in SAFE and headers.get(HEADER) != "1":
            raise Refused("A change needs the header X-Curvelab: 1", "", "Send it with the request")

    def _is_ours(self, host: str) -> bool:
        """Whether a host is served; beyond loopback any number of an address is, as no name can be made to mean it."""
        return host in self._door.hosts or (self._door.token is not None and _is_number(host))

    def _let_in(self, scope: Scope, headers: Headers) -> Response | None:
        """Beyond loopback each request shows the token; an address that carries it is turned into a cookie."""
        if self._door.token is None:
            return None
        url = URL(scope=scope)
        shown = dict(part.partition("=")[::2] for part in url.query.split("&")).get("token", "")
        if url.path == "/" and shown and _same(shown, self._door.token):
            answer = RedirectResponse("/", 303)
            answer.set_cookie(COOKIE, self._door.token, httponly=True, samesite="strict")
            return answer
        given = headers.get("authorization", "").removeprefix("Bearer ").strip() or _cookie(headers)
        if not _same(given, self._door.token):
            raise Refused("The workbench needs its token", "", "Open the address it printed when it started")
        return None


def _is_number(host: str) -> bool:
    """Whether a host is the number of an address, with its port."""
    name, _, port = host.rpartition(":")
    try:
        ipaddress.ip_address(name.removeprefix("[").removesuffix("]"))
    except ValueError:
        return False
    return port.isascii() and port.isdigit()


def _cookie(headers: Headers) -> str:
    try:
        found = SimpleCookie(headers.get("cookie", "")).get(COOKIE)
    except CookieError:
        return ""
    return found.value if found else ""


def _same(given: str, token: str) -> bool:
    return hmac.compare_digest(given.encode(), token.encode())
