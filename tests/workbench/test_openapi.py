"""The description says what is served, no more and no less; requests drawn from it never break the server."""

from pathlib import Path
from typing import Any

import pytest
from starlette.testclient import TestClient

from curvelab.workbench.openapi import described
from curvelab.workbench.routes import ROUTES


def test_every_address_is_described_and_served(client: TestClient) -> None:
    document = client.get("/api/openapi.json").json()
    assert document["openapi"] == "3.1.0"
    listed = {(method.upper(), path) for path, methods in document["paths"].items() for method in methods}
    assert listed == {(route.method, route.path) for route in ROUTES}
    for method, path in sorted(listed):
        address = path.format(id="0123456789abcdef", level=0, column=0, row=0, key="nobody")
        answer = client.request(method, address)
        told = answer.json()["error"] if answer.status_code >= 400 else {}
        assert answer.status_code != 405, (method, path)
        assert told.get("problem") != "There is nothing at this address", (method, path)


def test_a_method_that_is_not_described_is_refused(client: TestClient) -> None:
    for path in {route.path for route in ROUTES}:
        address = path.format(id="0123456789abcdef", level=0, column=0, row=0, key="nobody")
        assert client.put(address).status_code == 405


def test_every_operation_has_a_name_of_its_own() -> None:
    document = described(ROUTES)
    names = [operation["operationId"] for methods in document["paths"].values() for operation in methods.values()]
    assert len(set(names)) == len(names)


def test_every_parameter_of_an_address_is_described() -> None:
    for path, methods in described(ROUTES)["paths"].items():
        for operation in methods.values():
            named = {each["name"] for each in operation["parameters"] if each["in"] == "path"}
            assert named == {part.strip("{}").removesuffix("}.png") for part in _varying(path)}


def _varying(path: str) -> list[str]:
    return [part for part in path.split("/") if part.startswith("{")]


def test_changes_are_told_apart_by_their_kind() -> None:
    body: Any = described(ROUTES)["paths"]["/api/drafts/{id}/changes"]["post"]["requestBody"]
    schema = body["content"]["application/json"]["schema"]
    kinds = {each["properties"]["kind"]["const"] for each in schema["properties"]["change"]["anyOf"]}
    assert {"passes", "avoid", "mark", "accept", "undo", "worksheet"} <= kinds


def test_drawn_requests_never_break_it(tmp_path: Path) -> None:
    schemathesis = pytest.importorskip("schemathesis")
    from tests.workbench.drawn_requests import broken_by  # noqa: PLC0415

    assert broken_by(schemathesis, tmp_path / "firm.sqlite") == []
