"""Who may ask: hosts, origins, headers, tokens, limits; and what every answer tells the browser."""

from pathlib import Path

import pytest
from starlette.testclient import TestClient

from curvelab.workbench import draft_routes, route
from curvelab.workbench.app import application
from curvelab.workbench.bench import Bench
from curvelab.workbench.guard import Door
from curvelab.workbench.serve import is_loopback
from tests.workbench.served import ADDRESS, PORT


@pytest.mark.parametrize(
    "headers",
    [
        {"Host": "evil.example"},
        {"Host": f"evil.example:{PORT}"},
        {"Host": "127.0.0.1:1"},
        {"Origin": "http://evil.example"},
        {"Origin": "null"},
        {"Origin": f"https://127.0.0.1:{PORT}"},
        {"Sec-Fetch-Site": "cross-site"},
        {"Sec-Fetch-Site": "same-site"},
    ],
)
def test_strangers_neither_read_nor_change(client: TestClient, headers: dict[str, str]) -> None:
    """A page elsewhere whose name points here (rebinding), or whose script asks here (cross-site)."""
    for answer in (
        client.get("/api/devices", headers=headers),
        client.get("/", headers=headers),
        client.post("/api/drafts", params={"demo": "mcb-b"}, headers=headers),
    ):
        assert answer.status_code == 403
    assert client.get("/api/drafts").json() == []


@pytest.mark.parametrize("origin", [None, ADDRESS])
def test_the_page_and_programs_here_may(client: TestClient, origin: str | None) -> None:
    headers = {"Origin": origin} if origin else {}
    assert client.get("/api/version", headers=headers).status_code == 200


def test_a_change_needs_the_header(client: TestClient) -> None:
    del client.headers["X-Curvelab"]
    assert client.post("/api/drafts", params={"demo": "mcb-b"}).status_code == 403
    assert client.delete("/api/drafts/0123456789abcdef").status_code == 403


def test_every_answer_carries_the_policy(client: TestClient) -> None:
    for address in ("/api/version", "/api/nothing", "/api/openapi.json", "/static/nothing.js"):
        headers = client.get(address).headers
        assert "default-src 'none'" in headers["content-security-policy"]
        assert "unsafe" not in headers["content-security-policy"]
        assert headers["x-content-type-options"] == "nosniff"


def test_errors_are_json_of_one_line(client: TestClient) -> None:
    for answer in (client.get("/api/nothing"), client.put("/api/devices"), client.get("/api/devices?page=one")):
        assert answer.status_code in (400, 404, 405)
        error = answer.json()["error"]
        assert set(error) == {"problem", "expected", "fix"}
        assert "\n" not in error["problem"]


def test_too_much_is_refused_while_it_streams(client: TestClient, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(draft_routes, "UPLOAD_BYTES", 1000)
    monkeypatch.setattr(route, "LARGEST_BODY", 1000)
    taken = []

    def endless() -> object:
        for _ in range(10_000):
            taken.append(1)
            yield b"\x89PNG" * 100

    answer = client.post("/api/drafts", params={"name": "big.png"}, content=endless())
    assert answer.status_code == 413
    assert client.get("/api/drafts").json() == []
    review = client.post("/api/devices/x/review", content=b'{"name": "' + b"a" * 2000 + b'"}')
    assert review.status_code == 413


@pytest.mark.parametrize(
    "content",
    [
        b"",
        b"{",
        b"[1",
        b'"text"',
        b"null",
        b'{"name": "\\ud800"}',
        b"\xff\xfe{}",
        b"[" * 100_000,
        b'{"name": NaN}',
        b'{"name": "a", "name2": 1}',
        b'{"name": "Ida", "revision": 1e400}',
        b'{"name": "Ida", "revision": 99999999999999999999}',
        b'{"name": "Ida", "to": {"x": 1}}',
    ],
)
def test_a_hostile_body_is_refused_in_one_line(client: TestClient, content: bytes) -> None:
    answer = client.post("/api/devices/x/review", content=content)
    assert answer.status_code == 400
    assert len(answer.json()["error"]["problem"]) < 300


def test_no_path_from_the_browser_is_opened(client: TestClient, tmp_path: Path) -> None:
    (tmp_path / "secret.txt").write_text("secret")
    for address in (
        "/static/../../secret.txt",
        "/static/%2e%2e/%2e%2e/secret.txt",
        "/static//etc/passwd",
        "/../secret.txt",
    ):
        assert client.get(address).status_code in (400, 404)
    assert client.get("/api/drafts/..").status_code == 404
    assert client.get("/api/drafts/%2e%2e%2fsecret.txt").status_code == 404
    for name in (
        "../../x.png",
        "..\\..\\x.png",
        "/etc/passwd",
        "con.png",
        "a\x00b.png",
        "\u202egnp.exe",
        ".",
        "x" * 5000,
    ):
        answer = client.post("/api/drafts", params={"name": name}, content=(b"\x89PNG\r\n\x1a\n" + b"0" * 50))
        assert answer.status_code == 400, "it is no picture, whatever its name"
    assert sorted(path.name for path in tmp_path.iterdir()) == ["secret.txt"]


@pytest.fixture
def guarded(tmp_path: Path) -> TestClient:
    door = Door(hosts=frozenset({f"127.0.0.1:{PORT}"}), token="a-long-token")
    return TestClient(application(Bench(tmp_path / "firm.sqlite"), door), base_url=ADDRESS, follow_redirects=False)


def test_beyond_loopback_a_token_is_needed(guarded: TestClient) -> None:
    assert guarded.get("/api/version").status_code == 403
    assert guarded.get("/").status_code == 403
    assert guarded.get("/?token=wrong").status_code == 403
    assert guarded.get("/api/version", headers={"Authorization": "Bearer wrong"}).status_code == 403
    assert guarded.get("/api/version", headers={"Authorization": "Bearer a-long-token"}).status_code == 200
    turned = guarded.get("/?token=a-long-token")
    assert (turned.status_code, turned.headers["location"]) == (303, "/")
    assert "httponly" in turned.headers["set-cookie"].lower()
    assert "samesite=strict" in turned.headers["set-cookie"].lower()
    assert guarded.get("/api/version").status_code == 200, "the cookie is the token"


@pytest.mark.parametrize(
    ("host", "here"), [("127.0.0.1", True), ("::1", True), ("localhost", True), ("0.0.0.0", False)]
)
def test_what_counts_as_this_computer(host: str, here: bool) -> None:
    assert is_loopback(host) is here


def test_beyond_loopback_it_is_asked_by_any_of_its_numbers(guarded: TestClient) -> None:
    """Which of them a person types is not known; a name that points here is still refused."""
    token = {"Authorization": "Bearer a-long-token"}
    for host in (f"192.0.2.7:{PORT}", f"[2001:db8::1]:{PORT}"):
        assert guarded.get("/api/version", headers={**token, "Host": host}).status_code == 200
        assert guarded.get("/api/version", headers={"Host": host}).status_code == 403
    for host in (f"evil.example:{PORT}", "192.0.2.7.evil.example:1", "192.0.2.7", ":80"):
        assert guarded.get("/api/version", headers={**token, "Host": host}).status_code == 403
