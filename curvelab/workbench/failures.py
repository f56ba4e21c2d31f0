"""What a request is answered when it cannot be done: the status and the one-line error of the command line as JSON."""

from typing import Any

from curvelab.errors import CurvelabError, InputError, LibraryError, NotFoundError, SchemaError


class Unknown(InputError):  # noqa: N818 - it answers a question
    """There is no such draft, page or address."""


class Conflict(CurvelabError):  # noqa: N818 - it is a state, not a mistake
    """What the request builds on is no longer the newest; ``version`` is."""

    def __init__(self, problem: str, version: int) -> None:
        super().__init__(problem, "The newest state", "Look at it, then repeat the change")
        self.version = version


class TooLarge(InputError):  # noqa: N818
    """More was sent than is taken."""


class Busy(CurvelabError):  # noqa: N818
    """As much as can be done at once is being done."""


class Refused(CurvelabError):  # noqa: N818
    """The request does not come from the page or a program on this computer, or carries no token."""


STATUS: tuple[tuple[type[CurvelabError], int], ...] = (
    (Refused, 403),
    (Unknown, 404),
    (NotFoundError, 404),
    (Conflict, 409),
    (TooLarge, 413),
    (InputError, 400),
    (Busy, 503),
    (SchemaError, 500),
    (LibraryError, 503),
)


def status_of(error: CurvelabError) -> int:
    """The HTTP status that says what kind of error it is."""
    return next((status for kind, status in STATUS if isinstance(error, kind)), 500)


def told(error: CurvelabError) -> dict[str, Any]:
    """The body of the answer."""
    body: dict[str, Any] = {"error": error_json(error)}
    if isinstance(error, Conflict):
        body["version"] = error.version
    return body


def error_json(error: CurvelabError) -> dict[str, str]:
    """What is wrong, what would be right, what to do; each on one line."""
    return {name: " ".join(getattr(error, name).split()) for name in ("problem", "expected", "fix")}
