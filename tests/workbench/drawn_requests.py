"""Requests drawn from the OpenAPI description, well and badly formed, against a workbench with a draft and devices."""

import random
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path
from typing import Any

from hypothesis import HealthCheck, Phase, given, settings
from hypothesis.errors import Unsatisfiable
from starlette.testclient import TestClient

from curvelab.workbench.openapi import described
from curvelab.workbench.routes import ROUTES
from tests.workbench.served import opened, workbench

EXAMPLES = 4
"""Requests an operation and way of drawing."""
SLOW = ("overlay.png", "report.pdf", "report.html")
"""Drawing takes seconds; they have tests of their own."""


def broken_by(schemathesis: Any, library: Path) -> list[str]:
    """What went wrong: an answer of 500, or one that the description does not allow."""
    schema = schemathesis.openapi.from_dict(described(ROUTES))
    broken: list[str] = []
    with workbench(library) as client:
        state = opened(client, "vector/mcb-b")
        client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook"})
        known = {"id": state["id"], "key": "riverside-b32"}
        for operation in _operations(schema):
            for mode in (schemathesis.GenerationMode.POSITIVE, schemathesis.GenerationMode.NEGATIVE):
                if _can_be_drawn(operation, schemathesis, mode):
                    broken += _asked(client, operation.as_strategy(generation_mode=mode), known)
    return broken


def _operations(schema: Any) -> Iterator[Any]:
    for result in schema.get_all_operations():
        operation = result.ok()
        if not operation.path.endswith(SLOW):
            yield operation


def _can_be_drawn(operation: Any, schemathesis: Any, mode: Any) -> bool:
    """Whether anything can be wrong: an address without parameters or body has no ill-formed request."""
    has_parts = list(operation.iter_parameters()) or list(operation.body)
    return mode is schemathesis.GenerationMode.POSITIVE or bool(has_parts)


def _asked(client: TestClient, strategy: Any, known: dict[str, str]) -> list[str]:
    broken: list[str] = []
    chance = random.Random(7)

    @settings(
        max_examples=EXAMPLES,
        deadline=None,
        derandomize=True,
        database=None,
        phases=[Phase.generate],
        suppress_health_check=list(HealthCheck),
    )
    @given(strategy)
    def ask(case: Any) -> None:
        if chance.random() < 0.7:
            case.path_parameters = {**(case.path_parameters or {}), **_of_path(case, known)}
        answer = client.request(case.method, **_request(case))
        allowed = {int(status) for status in case.operation.definition.raw["responses"]}
        if answer.status_code >= 500 and answer.status_code != 503:
            broken.append(f"{case.method} {answer.url}: {answer.status_code} {case.body!r}")
        elif answer.status_code not in allowed:
            broken.append(f"{case.method} {answer.url}: {answer.status_code} is not described")
        elif answer.status_code >= 400 and not answer.json()["error"]["problem"]:
            broken.append(f"{case.method} {answer.url}: an error without words")

    # Not every operation has an ill-formed request that can be drawn.
    with suppress(Unsatisfiable):
        ask()
    return broken


def _of_path(case: Any, known: dict[str, str]) -> dict[str, str]:
    return {name: value for name, value in known.items() if f"{{{name}}}" in case.operation.path}


def _request(case: Any) -> dict[str, Any]:
    """What the client sends of a drawn case."""
    drawn = case.as_transport_kwargs(base_url="http://127.0.0.1:8765")
    names = {"url", "params", "json", "data", "headers"}
    request = {name: value for name, value in drawn.items() if name in names and value is not None}
    if "data" in request:
        request["content"] = request.pop("data")
    headers = {str(name): str(value) for name, value in request.get("headers", {}).items()}
    request["headers"] = {name: value for name, value in headers.items() if value.isascii() and value.isprintable()}
    return request
