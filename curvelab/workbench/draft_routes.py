"""Addresses of drafts: sheets come in, worksheets are changed, readings are stored.

What reads sheets is loaded when it is first asked for, so that the page is there at once.
"""

import asyncio
from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from starlette.concurrency import run_in_threadpool
from starlette.requests import Request
from starlette.responses import Response

from curvelab.errors import InputError
from curvelab.workbench.bench import Bench
from curvelab.workbench.changes import Change
from curvelab.workbench.failures import Busy, Conflict
from curvelab.workbench.route import Method, Nothing, Route, body_of, bounded_body, written
from curvelab.workbench.shapes import Schema

if TYPE_CHECKING:
    from curvelab.workbench.draft import Draft

LONGEST_WAIT_S = 25.0
CLICK_WAIT_S = 0.25
"""How long the answer to a change waits for the reading, so that a click is one request."""
WORTH_TELLING_S = 0.15
"""Progress that is told more often would only keep the page busy."""
MOST_UPLOADS = 2
UPLOAD_BYTES = 220_000_000
"""The size limit of a sheet's file."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Begin:
    """What a draft is begun from: the body's bytes called ``name``, a demo sheet, or a stored device's evidence."""

    name: str = ""
    page: int = 1
    plot: int | None = None
    demo: str | None = None
    device: str | None = None
    reading: int = 1


@dataclass(frozen=True, kw_only=True, slots=True)
class OfDraft:
    """One draft."""

    id: str


@dataclass(frozen=True, kw_only=True, slots=True)
class Look:
    """One draft; where it is still as ``since``, after it has changed or ``wait`` seconds."""

    id: str
    since: int | None = None
    wait: float = 0.0
    have: int | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Changing:
    """One draft; ``have`` is the reading the asker has."""

    id: str
    have: int | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Changed:
    """A change and the version it builds on."""

    base_version: int
    change: Change


@dataclass(frozen=True, kw_only=True, slots=True)
class Signed:
    """Who stores, why, and the version that was looked at."""

    author: str
    note: str = ""
    base_version: int | None = None


async def begin(bench: Bench, asked: Begin, request: Request) -> Response:
    """Begin a draft."""
    if bench.uploads >= MOST_UPLOADS:
        raise Busy("Several sheets are being opened already", "", "Try again in a moment")
    bench.uploads += 1
    try:
        data = await bounded_body(request, UPLOAD_BYTES)
        return await run_in_threadpool(lambda: written(_begun(bench, asked, data), 201))
    finally:
        bench.uploads -= 1


def _begun(bench: Bench, asked: Begin, data: bytes) -> dict[str, Any]:
    from curvelab.workbench import sources  # noqa: PLC0415
    from curvelab.workbench.state import draft_state  # noqa: PLC0415

    if asked.demo is not None:
        draft = sources.from_demo(bench.drafts, asked.demo)
    elif asked.device is not None:
        with bench.reading() as library:
            draft = sources.from_device(bench.drafts, library, asked.device, asked.reading)
    else:
        draft = sources.from_upload(bench.drafts, asked.name, data, page=asked.page, plot=asked.plot)
    return draft_state(draft)


def demo_sheets(_: Bench, __: Nothing) -> list[dict[str, str]]:
    """The sheets that come with the program."""
    from curvelab.workbench.sources import demo_sheets as listed  # noqa: PLC0415

    return listed()


def list_drafts(bench: Bench, _: Nothing) -> list[dict[str, Any]]:
    """All drafts, those changed last first."""
    return bench.drafts.listed()


async def look(bench: Bench, asked: Look, _: Request) -> Response:
    """A draft's state, now or once it has changed."""
    from curvelab.workbench.state import draft_state  # noqa: PLC0415

    draft = await run_in_threadpool(lambda: bench.drafts.draft(asked.id))
    if asked.since is not None and draft.tick == asked.since and asked.wait > 0:
        drafts = bench.drafts
        await draft.bell.heard(lambda: drafts.is_stopping or draft.tick != asked.since, min(asked.wait, LONGEST_WAIT_S))
        if draft.work.state == "reading" and not drafts.is_stopping:
            await asyncio.sleep(WORTH_TELLING_S)
    return await run_in_threadpool(lambda: written(draft_state(draft, asked.have)))


async def change(bench: Bench, asked: Changing, request: Request) -> Response:
    """Change a draft; its reading is in the answer where it is ready at once."""
    from curvelab.workbench.state import draft_state  # noqa: PLC0415

    body: Changed = await body_of(Changed, request)
    draft = await run_in_threadpool(lambda: bench.drafts.draft(asked.id))
    await run_in_threadpool(draft.change, body.base_version, body.change)
    await draft.bell.heard(lambda: draft.is_shown, CLICK_WAIT_S)
    return await run_in_threadpool(lambda: written(draft_state(draft, asked.have)))


def put_away(bench: Bench, asked: OfDraft) -> dict[str, Any]:
    """Move a draft to the bin."""
    bench.drafts.put_away(asked.id)
    return {"id": asked.id}


def restore(bench: Bench, asked: OfDraft) -> dict[str, Any]:
    """Bring a draft back from the bin."""
    return _state(bench.drafts.restore(asked.id))


def cancel(bench: Bench, asked: OfDraft) -> dict[str, Any]:
    """Stop reading."""
    draft = bench.drafts.draft(asked.id)
    draft.cancel()
    return _state(draft)


def read_again(bench: Bench, asked: OfDraft) -> dict[str, Any]:
    """Read what was stopped."""
    draft = bench.drafts.draft(asked.id)
    draft.read()
    return _state(draft)


def _state(draft: "Draft") -> dict[str, Any]:
    from curvelab.workbench.state import draft_state  # noqa: PLC0415

    return draft_state(draft)


def store(bench: Bench, asked: OfDraft, signed: Signed) -> dict[str, Any]:
    """Store the reading's devices in the library."""
    from curvelab.workbench.state import storable  # noqa: PLC0415

    if not signed.author.strip():
        raise InputError("To store needs a name", "", "Say who stores")
    draft = bench.drafts.draft(asked.id)
    if signed.base_version not in (None, draft.history.version):
        raise Conflict("The worksheet was changed elsewhere", draft.history.version)
    reading, files = storable(draft)
    with bench.writing() as library:
        stored = library.store(reading, author=signed.author, reason=signed.note, sheet_files=files)
    return {"devices": [{"key": each.key, "revision": each.revision, "changed": each.changed} for each in stored]}


DRAFT = "/api/drafts/{id}"

_STATE: Schema = {"type": "object", "required": ["id", "version", "tick", "work", "worksheet", "open", "can_store"]}


def _route(method: Method, path: str, summary: str, does: Callable[..., Any], **more: Any) -> Route:
    return Route(method=method, path=path, summary=summary, does=does, tag="drafts", **more)


DRAFT_ROUTES = (
    _route("GET", "/api/demo-sheets", "Sheets that come with the program", demo_sheets, answer={"type": "array"}),
    _route("GET", "/api/drafts", "Drafts, those changed last first", list_drafts, answer={"type": "array"}),
    _route("POST", "/api/drafts", "Begin a draft", begin, asked=Begin, raw=True, alive=True, status=201, answer=_STATE),
    _route("GET", DRAFT, "A draft, now or once it has changed", look, asked=Look, alive=True, answer=_STATE),
    _route("DELETE", DRAFT, "Move a draft to the bin", put_away, asked=OfDraft, answer={"type": "object"}),
    _route("POST", f"{DRAFT}/restore", "Bring a draft back from the bin", restore, asked=OfDraft, answer=_STATE),
    _route(
        "POST", f"{DRAFT}/changes", "Make one change", change, asked=Changing, body=Changed, alive=True, answer=_STATE
    ),
    _route("POST", f"{DRAFT}/cancel", "Stop reading", cancel, asked=OfDraft, answer=_STATE),
    _route("POST", f"{DRAFT}/read", "Read what was stopped", read_again, asked=OfDraft, answer=_STATE),
    _route("POST", f"{DRAFT}/store", "Store the devices", store, asked=OfDraft, body=Signed, answer={"type": "object"}),
)
