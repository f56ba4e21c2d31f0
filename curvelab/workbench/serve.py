"""Starts the server: one process on one port, for this computer, or behind a token for others."""

import ipaddress
import logging
import os
import secrets
import socket
import threading
import webbrowser
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from types import FrameType

import uvicorn

from curvelab.errors import InputError
from curvelab.workbench.allocation import return_large_blocks
from curvelab.workbench.app import application
from curvelab.workbench.bench import Bench
from curvelab.workbench.guard import Door, loopback_door, with_port

LOOPBACK = "127.0.0.1"
KEEP_ALIVE_S = 75
"""How long a connection waits for the next question; a person thinks in between."""
WAITING = 256
"""Connections that may wait to be taken."""
GRACE_S = 2
"""How long requests that are being answered may take once the server is to stop."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Wanted:
    """Where to serve what: port 0 is any that is free; ``opens`` shows the page in the browser."""

    library: Path
    host: str = LOOPBACK
    port: int = 0
    opens: bool = True


def serve(wanted: Wanted, say: Callable[[str], None]) -> None:
    """Serve until stopped from the terminal.

    Raises
    ------
    InputError
        The port is taken, or the host is not one of this computer's.
    """
    listening = _listening(wanted)
    host, port = listening.getsockname()[:2]
    door = loopback_door(port)
    if not is_loopback(wanted.host):
        names = {*door.hosts, *with_port((wanted.host, host, socket.gethostname().lower()), port)}
        door = Door(hosts=frozenset(names), token=secrets.token_urlsafe(24))
    address = _address(wanted.host, port, door.token)
    for line in _told(wanted, address, door):
        say(line)
    return_large_blocks()
    bench = Bench(wanted.library)
    app = application(bench, door)
    config = uvicorn.Config(
        app,
        log_level=logging.WARNING,
        access_log=False,
        server_header=False,
        timeout_keep_alive=KEEP_ALIVE_S,
        timeout_graceful_shutdown=GRACE_S,
        lifespan="on",
    )
    if wanted.opens:
        threading.Timer(0.2, webbrowser.open, [address]).start()
    with listening:
        _Server(config, bench.stop_waiting).run(sockets=[listening])


class _Server(uvicorn.Server):
    """Answers requests that wait before it stops."""

    def __init__(self, config: uvicorn.Config, stop_waiting: Callable[[], None]) -> None:
        super().__init__(config)
        self._stop_waiting = stop_waiting

    def handle_exit(self, sig: int, frame: FrameType | None) -> None:
        """Stop, on a signal from the terminal."""
        self._stop_waiting()
        super().handle_exit(sig, frame)


def is_loopback(host: str) -> bool:
    """Whether only this computer reaches a host."""
    if host == "localhost":
        return True
    try:
        return ipaddress.ip_address(host).is_loopback
    except ValueError:
        return False


def _listening(wanted: Wanted) -> socket.socket:
    try:
        family = socket.getaddrinfo(wanted.host, wanted.port, type=socket.SOCK_STREAM)[0][0]
        # Named, the protocol lets the event loop send small answers at once.
        listening = socket.socket(family, socket.SOCK_STREAM, socket.IPPROTO_TCP)
        try:
            if os.name == "posix":
                # A port just left may be used again at once; elsewhere the option would let two servers share one.
                listening.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
            listening.bind((wanted.host, wanted.port))
            listening.listen(WAITING)
        except BaseException:
            listening.close()
            raise
    except (OSError, UnicodeError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise InputError(
            f"Cannot serve at {wanted.host}, port {wanted.port}: {reason}", "", "Choose another port with --port"
        ) from None
    return listening


def _address(host: str, port: int, token: str | None) -> str:
    shown = f"[{host}]" if ":" in host else host
    return f"http://{shown}:{port}/{f'?token={token}' if token else ''}"


def _told(wanted: Wanted, address: str, door: Door) -> list[str]:
    lines = [f"Workbench at {address}", f"Library {wanted.library}"]
    if door.token is not None:
        lines += [
            f"Others on the network can reach it at {wanted.host}: whoever has the token above can read and change it.",
            "The connection is not encrypted; put it behind a server that is, beyond a network you trust.",
        ]
    return [*lines, "Stop it with Ctrl+C."]
