"""The OpenAPI 3.1 description, made from the table of routes."""

from collections.abc import Iterable
from dataclasses import fields
from types import UnionType
from typing import Any, Union, get_args, get_origin

from curvelab import __version__
from curvelab.workbench.route import NAMED, Route
from curvelab.workbench.shapes import Schema, hints_of, is_needed, schema_of

PROBLEMS = {
    "400": "Something in the request is wrong",
    "403": "The request comes from elsewhere, or lacks its token or header",
    "404": "There is no such thing",
    "409": "The state has moved on",
    "413": "Too much was sent",
    "503": "Too much is being done, or the library cannot be used now",
}


def described(routes: Iterable[Route]) -> Schema:
    """The document."""
    paths: Schema = {}
    for route in routes:
        paths.setdefault(route.path, {})[route.method.lower()] = _operation(route)
    return {
        "openapi": "3.1.0",
        "info": {
            "title": "curvelab workbench",
            "version": __version__,
            "description": "Time-current curves: readings being made, and the device library. Currents in A or in the "
            "base that is named, times in s. Requests that change something carry the header X-Curvelab: 1.",
        },
        "paths": paths,
        "components": {"schemas": {"Problem": PROBLEM}},
    }


PROBLEM: Schema = {
    "type": "object",
    "properties": {
        "error": {
            "type": "object",
            "properties": {name: {"type": "string"} for name in ("problem", "expected", "fix")},
            "required": ["problem", "expected", "fix"],
        },
        "version": {"type": "integer"},
    },
    "required": ["error"],
}


def _operation(route: Route) -> Schema:
    good: Schema = {"description": "Done", "content": {route.media: {"schema": route.answer}}}
    problem = {"application/json": {"schema": {"$ref": "#/components/schemas/Problem"}}}
    operation: Schema = {
        "summary": route.summary,
        "operationId": _name(route),
        "tags": [route.tag],
        "parameters": list(_parameters(route)),
        "responses": {
            str(route.status): good,
            **{status: {"description": words, "content": problem} for status, words in PROBLEMS.items()},
        },
    }
    if route.body is not None:
        operation["requestBody"] = {
            "required": True,
            "content": {"application/json": {"schema": schema_of(route.body)}},
        }
    if route.raw:
        operation["requestBody"] = {"content": {"application/octet-stream": {"schema": {}}}}
    return operation


def _name(route: Route) -> str:
    words = [part.strip("{}").replace(".", "-") for part in route.path.removeprefix("/api/").split("/")]
    return "-".join([route.method.lower(), *words])


def _parameters(route: Route) -> Iterable[Schema]:
    hints, named = hints_of(route.asked), set(NAMED.findall(route.path))
    for each in fields(route.asked):
        kind: Any = hints[each.name]
        if get_origin(kind) in (Union, UnionType):
            kind = next(inner for inner in get_args(kind) if inner is not type(None))
        yield {
            "name": each.name,
            "in": "path" if each.name in named else "query",
            "required": each.name in named or is_needed(each),
            "schema": {**schema_of(kind), **dict(each.metadata)},
        }
    if route.method != "GET":
        yield {"name": "X-Curvelab", "in": "header", "required": True, "schema": {"const": "1"}}
