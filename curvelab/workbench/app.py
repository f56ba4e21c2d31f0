"""The application: the table of routes, the page's files, and one-line errors for everything that goes wrong."""

import logging
from collections.abc import AsyncIterator, Awaitable, Callable, Iterable, Mapping
from contextlib import asynccontextmanager
from itertools import groupby
from pathlib import Path
from typing import Any

from starlette.applications import Starlette
from starlette.exceptions import HTTPException
from starlette.requests import Request
from starlette.responses import FileResponse, JSONResponse, Response
from starlette.routing import Mount
from starlette.routing import Route as Address
from starlette.staticfiles import StaticFiles
from starlette.types import ASGIApp

from curvelab.errors import CurvelabError
from curvelab.workbench.bench import Bench
from curvelab.workbench.failures import status_of, told
from curvelab.workbench.guard import Door, Guard
from curvelab.workbench.openapi import described
from curvelab.workbench.route import Method, Route, answered
from curvelab.workbench.routes import ROUTES

PAGE = Path(__file__).parent / "page"

log = logging.getLogger(__name__)

Endpoint = Callable[[Request], Awaitable[Response]]


def application(bench: Bench, door: Door) -> ASGIApp:
    """Everything that is served, behind the door."""

    @asynccontextmanager
    async def lifespan(_: Starlette) -> AsyncIterator[None]:
        yield
        bench.close()

    async def description(_: Request) -> Response:
        return JSONResponse(described(ROUTES))

    async def page(_: Request) -> Response:
        return FileResponse(PAGE / "index.html", headers={"cache-control": "no-cache"})

    starlette = Starlette(
        routes=[
            *_endpoints(ROUTES, bench),
            Address("/api/openapi.json", description, methods=["GET"]),
            Address("/", page, methods=["GET"]),
            Mount("/static", _PageFiles(directory=PAGE, check_dir=False)),
        ],
        exception_handlers={
            CurvelabError: _expected,
            HTTPException: _not_served,
            Exception: _unexpected,
        },
        lifespan=lifespan,
    )
    return Guard(starlette, door)


def _endpoints(routes: Iterable[Route], bench: Bench) -> Iterable[Address]:
    """One endpoint an address, so that a wrong method is told apart from a wrong address."""
    for path, group in groupby(sorted(routes, key=lambda route: route.path), key=lambda route: route.path):
        by_method = {route.method: route for route in group}
        yield Address(path, _endpoint(by_method, bench), methods=list(by_method))


def _endpoint(by_method: Mapping[Method, Route], bench: Bench) -> Endpoint:
    async def endpoint(request: Request) -> Response:
        method: Any = "GET" if request.method == "HEAD" else request.method
        return await answered(by_method[method], bench, request)

    return endpoint


class _PageFiles(StaticFiles):
    """The page's files; asked anew each time, so that a newer version of the program is seen at once."""

    def file_response(self, *given: object, **named: object) -> Response:
        answer = super().file_response(*given, **named)  # type: ignore[arg-type]
        answer.headers["cache-control"] = "no-cache"
        return answer


async def _expected(_: Request, error: Exception) -> Response:
    assert isinstance(error, CurvelabError)
    return JSONResponse(told(error), status_of(error))


async def _not_served(request: Request, error: Exception) -> Response:
    assert isinstance(error, HTTPException)
    words = {404: "There is nothing at this address", 405: f"{request.method} is not possible at this address"}
    problem = CurvelabError(words.get(error.status_code, error.detail), "", "See /api/openapi.json")
    return JSONResponse(told(problem), error.status_code, headers=error.headers)


async def _unexpected(request: Request, error: Exception) -> Response:
    log.error("%s %s failed", request.method, request.url.path, exc_info=error)
    problem = CurvelabError("The program made a mistake in answering", "", "Try again; the terminal says more")
    return JSONResponse(told(problem), 500)
