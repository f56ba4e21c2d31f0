"""One row of the table of routes: what is asked, what is answered, who does it. The description is made from it."""

import json
import re
from collections.abc import Callable
from dataclasses import MISSING, dataclass, field, fields
from types import UnionType
from typing import Any, Literal, Union, get_args, get_origin

from starlette.concurrency import run_in_threadpool
from starlette.requests import ClientDisconnect, Request
from starlette.responses import JSONResponse, Response

from curvelab.errors import InputError
from curvelab.workbench.failures import TooLarge
from curvelab.workbench.shapes import Schema, hints_of, value_of, wrong

LARGEST_BODY = 5 * 1024 * 1024
"""Bytes of a JSON body; a worksheet's text has at most 4 MB."""

MOST_VALUES = 2_000
"""Values of one name in an address."""

Method = Literal["GET", "POST", "DELETE"]

NAMED = re.compile(r"{(\w+)}")


@dataclass(frozen=True, kw_only=True, slots=True)
class Nothing:
    """A request that asks nothing beside its address."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Content:
    """An answer that is no JSON."""

    data: bytes
    media: str
    name: str | None = None
    """What a browser calls the file when it keeps it; None to show it."""
    lasting: bool = False
    """Whether the same address always gives the same."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Route:
    """One method of one address.

    Parameters
    ----------
    path : str
        With ``{name}`` for each part that varies.
    asked : type
        A dataclass: fields named in ``path`` come from there, others from the query.
    body : type or None
        The dataclass or union of them that the JSON body is; None where there is none.
    raw : bool
        The body is a file's bytes, which the handler takes from the request itself.
    does : callable
        ``does(bench, asked[, body])``; with ``alive`` a coroutine ``does(bench, asked, request)`` instead.
    answer : dict
        JSON Schema of the answer; empty for another media type.
    """

    method: Method
    path: str
    summary: str
    does: Callable[..., Any]
    asked: type = Nothing
    body: Any = None
    raw: bool = False
    alive: bool = False
    status: int = 200
    answer: Schema = field(default_factory=dict)
    media: str = "application/json"
    tag: str = "library"


async def answered(route: Route, bench: Any, request: Request) -> Response:
    """Check what is asked, do it, and write the answer.

    Raises
    ------
    CurvelabError
        What is asked cannot be done.
    """
    asked = asked_of(route, request)
    if route.alive:
        answer: Response = await route.does(bench, asked, request)
        return answer
    given = () if route.body is None else (await body_of(route.body, request),)
    # Writing a large answer takes a while too, in which others should be answered.
    return await run_in_threadpool(lambda: written(route.does(bench, asked, *given), route.status))


def written(result: Any, status: int = 200) -> Response:
    """A result as an answer."""
    if isinstance(result, Response):
        return result
    if not isinstance(result, Content):
        return JSONResponse(result, status)
    headers = {}
    if result.name is not None:
        headers["content-disposition"] = f'attachment; filename="{result.name}"'
    if result.lasting:
        headers["cache-control"] = "private, max-age=31536000, immutable"
    return Response(result.data, status, headers, result.media)


def asked_of(route: Route, request: Request) -> Any:
    """The parameters of a request as the record the route declares.

    Raises
    ------
    InputError
        One is missing, not known, or not what it must be.
    """
    hints, values = hints_of(route.asked), {}
    named = set(NAMED.findall(route.path))
    known = {each.name for each in fields(route.asked)}
    for name in request.query_params:
        if name not in known - named:
            raise InputError(
                f"The parameter '{name}' is not known here", f"Known: {', '.join(known - named) or 'none'}"
            )
    for each in fields(route.asked):
        texts = [request.path_params[each.name]] if each.name in named else request.query_params.getlist(each.name)
        if texts:
            values[each.name] = _from_text(hints[each.name], texts, each.name)
        elif each.default is MISSING and each.default_factory is MISSING:
            raise InputError(f"The parameter '{each.name}' is missing")
    return route.asked(**values)


def _from_text(kind: Any, texts: list[str], name: str) -> Any:
    if get_origin(kind) is tuple:
        if len(texts) > MOST_VALUES:
            raise InputError(f"'{name}' is given {len(texts)} times", f"At most {MOST_VALUES} times")
        return tuple(_one(get_args(kind)[0], text, name) for text in texts)
    if len(texts) > 1:
        raise InputError(f"'{name}' is given {len(texts)} times", "Once")
    return _one(kind, texts[0], name)


def _one(kind: Any, text: str, name: str) -> Any:
    if get_origin(kind) in (Union, UnionType):
        kind = next(each for each in get_args(kind) if each is not type(None))
    given: Any = text
    if kind in (float, int):
        try:
            given = kind(text)
        except ValueError:
            raise wrong(text, name, "a number" if kind is float else "a whole number") from None
    elif kind is bool:
        given = {"true": True, "false": False}.get(text, text)
    return value_of(kind, given, name)


async def body_of(kind: Any, request: Request) -> Any:
    """The JSON body as the record it must be.

    Raises
    ------
    InputError
        It is something else, or too large.
    """
    content = await bounded_body(request, LARGEST_BODY)
    try:
        given = json.loads(content)
        # Halves of characters, which JSON can name, could be neither written nor sent.
        json.dumps(given, ensure_ascii=False).encode()
    except (ValueError, RecursionError) as error:
        raise InputError(f"The body is not JSON: {' '.join(str(error).split())[:80]}", "A JSON text in UTF-8") from None
    return value_of(kind, given, "body")


async def bounded_body(request: Request, largest: int) -> bytes:
    """The body, refused as soon as it is too large."""
    content = bytearray()
    try:
        async for piece in request.stream():
            content += piece
            if len(content) > largest:
                raise TooLarge(f"The body has more than {largest // 1024**2} MB", "", "Send less")
    except ClientDisconnect:
        raise InputError("The request ended before its body did") from None
    return bytes(content)
