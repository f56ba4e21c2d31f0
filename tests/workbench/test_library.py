"""The library over HTTP: the same answers as in Python, reviews by two people, hostile keys."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from starlette.testclient import TestClient

import curvelab
from curvelab.paths import shipped
from tests.workbench.served import workbench

SHEETS = shipped("demo_curves") / "sheets"


@pytest.fixture(scope="module")
def library(tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("library") / "firm.sqlite"
    worksheets = [SHEETS / "vector" / name for name in ("mcb-b.toml", "mccb-long-time.toml")]
    readings = [curvelab.digitise(each) for each in worksheets]
    files = [each.with_suffix(".pdf") for each in worksheets]
    with curvelab.open_library(path) as opened:
        opened.store(readings, author="Ida Brook", reason="catalogue", sheet_files=files)
    return path


@pytest.fixture(scope="module")
def client(library: Path) -> Iterator[TestClient]:
    with workbench(library) as served:
        yield served


def test_times_and_currents_are_those_of_the_device(client: TestClient, library: Path) -> None:
    told = client.get("/api/devices/riverside-b32/trip-time?current=100&current=160").json()
    with curvelab.open_library(library) as opened:
        device = opened.device("riverside-b32")
    times = device.trip_time([100.0, 160.0])
    assert times.slow is not None
    for k, answer in enumerate(told["answers"]):
        assert answer["slow"]["value"] == times.slow.value[k]
        assert answer["slow"]["interval"] == [times.slow.lower[k], times.slow.upper[k]]
    currents = client.get("/api/devices/riverside-b32/trip-current?time=0.4").json()["answers"][0]
    found = device.trip_current(0.4)
    assert found.trips is not None
    assert currents["trips"]["value"] == pytest.approx(found.trips.value)


def test_an_adjustable_device_is_asked_at_its_settings(client: TestClient, library: Path) -> None:
    with curvelab.open_library(library) as opened:
        (key,) = [row["device_key"] for row in opened.index() if row["kind"] == "mccb"]
        settings = {each.name: each.to_value or each.steps[0] for each in opened.record(key).nameplate.settings}
    refused = client.get(f"/api/devices/{key}/trip-time?current=500")
    assert refused.status_code == 400
    given = "".join(f"&set={name}={value:g}" for name, value in settings.items())
    told = client.get(f"/api/devices/{key}/trip-time?current=500{given}").json()
    assert told["settings"] == settings


def test_a_device_is_told_with_all_that_is_known(client: TestClient) -> None:
    told = client.get("/api/devices/riverside-b32").json()
    assert told["nameplate"]["rated_current_a"] == 32
    assert any(each["outcome"] == "meets" for each in told["findings"])
    assert any("Revision 1 of riverside-b32 is not released" in caution for caution in told["cautions"])
    assert told["readings"] == [{"number": 1, "file": "mcb-b.pdf", "page": 1, "is_kept": True}]
    assert client.get("/api/devices/riverside-b32@7").status_code == 404
    assert client.get("/api/devices/nothing-like-it").status_code == 404


def test_bands_compare_find_and_export(client: TestClient) -> None:
    bands = client.get("/api/devices/riverside-b32/bands").json()
    assert bands["bands"][0]["slow"]["parts"]
    compared = client.get("/api/compare?key=riverside-b40&key=riverside-b16&current=400").json()
    assert compared["devices"] == ["riverside-b40", "riverside-b16"]
    found = client.get("/api/find-bands?holds_a=30&for_s=100").json()
    assert found["total"] == len(found["devices"]) > 0
    assert client.get("/api/find-bands?holds_a=30").status_code == 400
    table = client.get("/api/devices/riverside-b32/points.csv")
    assert table.headers["content-type"].startswith("text/csv")
    assert "riverside-b32" in table.text
    assert client.get("/api/devices/riverside-b32/export.jsonl").text.startswith('{"format":')


def test_the_overlay_of_a_revision_can_be_seen(client: TestClient) -> None:
    picture = client.get("/api/devices/riverside-b32@1/overlay.png")
    assert picture.content.startswith(b"\x89PNG")
    assert client.get("/api/devices/riverside-b32@1/overlay.png?reading=2").status_code == 404


def test_the_review_document_is_to_keep(client: TestClient) -> None:
    document = client.get("/api/devices/riverside-b32/report.pdf")
    assert document.content.startswith(b"%PDF")
    assert document.headers["content-disposition"].startswith("attachment")


def test_a_release_needs_a_second_person(client: TestClient) -> None:
    review = "/api/devices/riverside-b16/review"
    assert client.post(review, json={"to": "checked", "name": "Ida Brook"}).status_code == 200
    alone = client.post(review, json={"to": "released", "name": "ida  brook"})
    assert alone.status_code == 400
    assert "second person" in alone.json()["error"]["expected"]
    assert client.post(review, json={"to": "released", "name": "Otto Weir"}).json()["state"] == "released"
    told = client.get("/api/devices/riverside-b16/history").json()
    assert [each["action"] for each in told] == ["stored", "reviewed", "reviewed"]
    assert told[-1]["name"] == "Otto Weir"


@pytest.mark.parametrize(
    ("question", "outcome"),
    [
        ("/api/devices/riverside-b32/disconnection?voltage_v=230&loop_ohm=0.5", "meets"),
        ("/api/devices/riverside-b32/withstand?material=copper&insulation=pvc70&least_a=400&greatest_a=3000", None),
        ("/api/devices/riverside-b32/overload?capacity_a=36&design_a=30", "meets"),
        ("/api/devices/riverside-b32/breaking?prospective_a=5000&voltage_v=230", "meets"),
        ("/api/devices/riverside-b32/breaking?prospective_a=9000&voltage_v=230", "fails"),
        ("/api/discrimination?upstream=riverside-b40&downstream=riverside-b10&up_to_a=100", None),
    ],
)
def test_calculators_answer_as_on_the_command_line(client: TestClient, question: str, outcome: str | None) -> None:
    told = client.get(question)
    assert told.status_code == 200, told.text
    assert told.json()["cautions"]
    if outcome is not None:
        assert told.json()["outcome"] == outcome


@pytest.mark.parametrize(
    "question",
    [
        "/api/devices/riverside-b32/disconnection",
        "/api/devices/riverside-b32/disconnection?voltage_v=-230",
        "/api/devices/riverside-b32/disconnection?voltage_v=nan",
        "/api/devices/riverside-b32/overload?capacity_a=1.7e308",
        "/api/devices/riverside-b32/disconnection?voltage_v=230&system=XX",
        "/api/devices/riverside-b32/withstand?material=cheese&insulation=pvc70&least_a=400&greatest_a=3000",
        "/api/devices/riverside-b32/withstand?material=copper&insulation=pvc70&least_a=400&greatest_a=3",
        "/api/discrimination?upstream=riverside-b40&downstream=riverside-b10&ratio=2",
    ],
)
def test_calculators_refuse_what_cannot_be_asked(client: TestClient, question: str) -> None:
    assert client.get(question).status_code == 400


def test_a_library_that_is_not_there_yet_is_empty(tmp_path: Path) -> None:
    with workbench(tmp_path / "none.sqlite") as client:
        assert client.get("/api/devices").json() == {"total": 0, "more": False, "page": 1, "devices": []}
        assert not (tmp_path / "none.sqlite").exists()


@pytest.mark.parametrize("key", ["%2e%2e%2f%2e%2e%2fetc%2fpasswd", "a'%20OR%201=1--", "%00", "x" * 3000, "a@-1"])
def test_hostile_keys_are_only_unknown(client: TestClient, key: str) -> None:
    assert client.get(f"/api/devices/{key}").status_code in (400, 404)


def test_pages_and_sorting(client: TestClient) -> None:
    first = client.get("/api/devices?sort=-rated_current&count=2").json()
    second = client.get("/api/devices?sort=-rated_current&count=2&page=2").json()
    ratings = [row["rated_current_a"] for row in first["devices"] + second["devices"]]
    assert ratings == sorted(ratings, reverse=True)
    assert client.get("/api/devices?sort=secret").status_code == 400
    assert client.get("/api/devices?count=0").status_code == 400
    assert client.get("/api/devices?colour=red").status_code == 400
