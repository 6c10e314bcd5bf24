"""What does not come from the page is refused cleanly, while a normal page keeps working."""

import asyncio
import http.client
import json
import os
import re
import signal
import socket
import threading
import time
import tomllib
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest

from fatigue.case.shipped import demo_case
from reports.live.engine import Engine
from tests.live.serving import served

DEMO = tomllib.loads(demo_case().read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def server(tmp_path_factory):
    folder = tmp_path_factory.mktemp("outer") / "inner"
    folder.mkdir()
    (folder.parent / "secret.toml").write_text('title = "secret"\n', encoding="utf-8")
    (folder / "mine.toml").write_bytes(demo_case().read_bytes())
    (folder / "link.toml").symlink_to(folder.parent / "secret.toml")
    with served(folder) as running:
        running.answer(DEMO)
        yield running


@pytest.fixture(autouse=True)
def _still_works(server):
    """After every attack a normal page is served, by the same process."""
    yield
    assert server.process.poll() is None
    assert server.ask("GET", "/start", X_Faying_Page="normal")[0] == 200


def test_a_normal_page_is_served(server):
    status, text = server.ask("GET", f"/?token={server.token}", X_Faying_Token=None)
    assert status == 200
    assert "main.js" in text
    assert json.loads(server.ask("GET", "/start")[1])["document"] == DEMO
    assert json.loads(server.ask("GET", "/start")[1])["cases"] == ["mine.toml"]


def test_it_hears_this_machine_only(server):
    listening = [
        line.split()[1]
        for line in Path("/proc/net/tcp").read_text(encoding="utf-8").splitlines()[1:]
        if line.split()[3] == "0A" and line.split()[1].endswith(f":{server.port:04X}")
    ]
    assert listening == [f"0100007F:{server.port:04X}"]


@pytest.mark.parametrize("host", ["example.org", "example.org:80", "127.0.0.1", "127.0.0.1.example.org", "0.0.0.0", ""])
@pytest.mark.parametrize("path", ["/", "/start", "/static/main.js"])
def test_foreign_host_is_refused(server, host, path):
    assert server.ask("GET", path, Host=host)[0] == 421


def test_no_host_or_two_hosts_are_refused(server):
    for heads in ("", f"Host: {server.host}\r\nHost: example.org\r\n"):
        with socket.create_connection(("127.0.0.1", server.port), timeout=10) as own:
            own.sendall(f"GET /start HTTP/1.1\r\n{heads}X-Faying-Token: {server.token}\r\n\r\n".encode())
            assert re.match(rb"HTTP/1.1 4\d\d ", own.recv(200))


@pytest.mark.parametrize("origin", ["http://example.org", "null", "https://127.0.0.1", "http://127.0.0.1:1", None])
def test_foreign_origin_is_refused(server, origin):
    assert server.ask("POST", "/ask/answer", {"document": DEMO}, Origin=origin)[0] == 403
    if origin is not None:
        assert server.ask("GET", "/start", Origin=origin)[0] == 403


def test_another_site_in_the_browser_is_refused(server):
    assert server.ask("GET", "/start", Sec_Fetch_Site="cross-site")[0] == 403
    assert server.ask("GET", "/static/main.js", Sec_Fetch_Site="same-site")[0] == 403
    assert server.ask("GET", "/start", Sec_Fetch_Site="same-origin")[0] == 200


@pytest.mark.parametrize("token", [None, "", "wrong", "é".encode().decode("latin-1")])
@pytest.mark.parametrize(
    ("method", "path"),
    [
        ("GET", "/"),
        ("GET", "/start"),
        ("GET", "/open?demo=crown-lap"),
        ("GET", "/report?name=a"),
        ("POST", "/ask/save"),
    ],
)
def test_no_token_no_answer(server, token, method, path):
    body = {"document": DEMO, "name": "stolen"} if method == "POST" else None
    status, text = server.ask(method, path, body, X_Faying_Token=token)
    assert status == 403
    assert "token" in text
    assert not (server.folder / "stolen.toml").exists()


def test_tokens_are_long_and_new_each_time(server, tmp_path):
    with served(tmp_path) as other:
        assert other.token != server.token
        assert len(other.token) >= 32
        assert other.ask("GET", "/start", X_Faying_Token=server.token)[0] == 403


@pytest.mark.parametrize("told", [True, False])
def test_an_oversized_body_is_refused(server, told):
    body = json.dumps({"document": {**DEMO, "title": "x" * 200_000}}).encode()
    if told:
        assert server.ask("POST", "/ask/answer", body)[0] == 413
    else:  # in chunks, without saying how much will come
        status, _ = server.ask("POST", "/ask/answer", iter([body[:50_000], body[50_000:]]), Transfer_Encoding=None)
        assert status == 413


@pytest.mark.parametrize("length", ["-1", "1e3", "99999999999999999999"])
def test_a_body_of_a_false_length_is_refused(server, length):
    with socket.create_connection(("127.0.0.1", server.port), timeout=10) as own:
        heads = "".join(f"{key}: {value}\r\n" for key, value in server.headers().items())
        own.sendall(f"POST /ask/answer HTTP/1.1\r\n{heads}Content-Length: {length}\r\n\r\n".encode())
        assert re.match(rb"HTTP/1.1 4\d\d ", own.recv(200))


@pytest.mark.parametrize(
    "body",
    [
        b"",
        b"[]",
        b"{}",
        b"\xff\xfe",
        b'{"document": 3}',
        b'{"document": {"title": NaN}}',
        b'{"document": ' + b"[" * 30_000,
        b'{"document": {"title": ' + b"1" * 6000 + b"}}",
    ],
)
def test_what_is_no_request_is_refused(server, body):
    assert server.ask("POST", "/ask/answer", body)[0] == 400


def test_strange_tables_are_faults_not_crashes(server):
    for strange in (
        {},
        {"title": None},
        {"row": 3, "sheet": [[]], "hole": [], "loads": []},
        {"\ud800": {"a": "\udfff"}},
        {"hole": {"x": {"y": {"z": {"a": {"b": {"c": {"d": {"e": {"f": {"g": {"h": 1}}}}}}}}}}}},
        {**DEMO, "title": "__import__('os').system('touch pwned')"},
    ):
        found = server.answer(strange)
        assert "faults" in found or "failed" in found or found["title"] == strange["title"]
    assert not (server.folder / "pwned").exists()


@pytest.mark.parametrize(
    "path",
    [
        "/static/../server.py",
        "/static/..%2Fserver.py",
        "/static/%2e%2e%2fserver.py",
        "/static/__init__.py",
        "/static//etc/passwd",
        "/open?case=../secret.toml",
        "/open?case=link.toml",
        "/open?case=/etc/passwd",
        "/open?case=mine.toml%00",
        "/open?demo=../../../pyproject",
        "/open?demo=starter",
        "/report?name=../x",
        "/report?name=..",
        "/report?name=",
        "/ask/answer",
        "/ask/open",
        "/docs",
    ],
)
def test_no_path_leads_out(server, path):
    status, text = server.ask("GET", path)
    assert status in (404, 405)
    assert "secret" not in text
    assert "import" not in text


@pytest.mark.parametrize(
    "name", ["../out", "a/b", "..", ".hidden", "a.toml", "con", "x" * 61, "", 3, None, "a\n", "/tmp/x"]
)
@pytest.mark.parametrize("task", ["save", "report"])
def test_no_name_leads_out(server, name, task):
    before = sorted(server.folder.parent.rglob("*"))
    found = server.answer(DEMO, task, name=name)
    assert [fault["where"] for fault in found["faults"]] == ["name"]
    assert sorted(server.folder.parent.rglob("*")) == before


def test_a_file_of_the_folder_is_read_and_a_report_cannot_ask_the_server(server):
    assert json.loads(server.ask("GET", "/open?case=mine.toml")[1])["document"] == DEMO
    place = server.folder / "shown report"
    place.mkdir(exist_ok=True)
    (place / "report.html").write_text("<h1>x</h1>", encoding="utf-8")
    connection = http.client.HTTPConnection("127.0.0.1", server.port, timeout=10)
    connection.request("GET", f"/report?name=shown&token={server.token}", headers={"Host": server.host})
    answer = connection.getresponse()
    assert answer.status == 200
    policy = answer.getheader("Content-Security-Policy")
    assert policy.startswith("sandbox allow-scripts;")
    assert "connect-src" not in policy
    assert "default-src 'none'" in policy
    connection.close()


def test_every_answer_says_what_a_browser_may_do(server):
    for path in ("/", "/start", "/static/main.js", "/nothing"):
        connection = http.client.HTTPConnection("127.0.0.1", server.port, timeout=10)
        connection.request("GET", path, headers=server.headers())
        answer = connection.getresponse()
        answer.read()
        assert "default-src 'none'; script-src 'self'" in answer.getheader("Content-Security-Policy")
        assert "unsafe" not in answer.getheader("Content-Security-Policy")
        assert answer.getheader("X-Content-Type-Options") == "nosniff"
        assert answer.getheader("Referrer-Policy") == "no-referrer"
        assert answer.getheader("Access-Control-Allow-Origin") is None
        connection.close()


def test_a_flood_is_refused_while_a_page_works(server):
    ended = threading.Event()

    def flood(heads):
        got = []
        request = f"GET /start HTTP/1.1\r\n{heads}\r\n".encode()
        last = request[:-2] + b"Connection: close\r\n\r\n"
        while not ended.is_set():
            with socket.create_connection(("127.0.0.1", server.port), timeout=20) as own:
                try:
                    own.sendall(request * 100 + last)
                    text = b"".join(iter(lambda own=own: own.recv(65536), b""))
                except OSError:  # refused: the rest is not listened to
                    continue
                got += re.findall(rb"HTTP/1.1 (\d+) ", text)
        return got

    host = f"Host: {server.host}\r\n"
    known = f"{host}X-Faying-Token: {server.token}\r\nX-Faying-Page: flood\r\n"
    with ThreadPoolExecutor(4) as pool:
        # two know no token; two have it and name one page
        running = [pool.submit(flood, heads) for heads in (host, host, known, known)]
        try:
            time.sleep(1.0)
            lives = [server.answer({**DEMO, "title": f"t{i}"})["rows"][0]["life_flights"] for i in range(5)]
            time.sleep(1.0)
        finally:
            ended.set()
    strangers = [status for own in running[:2] for status in own.result()]
    page = [status for own in running[2:] for status in own.result()]
    assert len(set(lives)) == 1
    assert set(strangers) == {b"403"}
    assert set(page) == {b"200", b"429"}


def test_two_pages_at_once_each_get_their_own(server):
    def page(name):
        lives = []
        for fit in (0.1, 0.4, 0.7):
            document = json.loads(json.dumps(DEMO))
            document["hole"]["driven"]["fit_percent"] = fit if name == "a" else -fit
            status, text = server.ask("POST", "/ask/answer", {"document": document}, X_Faying_Page=name)
            assert status == 200, text
            lives.append(json.loads(text)["rows"][0]["life_flights"])
        return lives

    with ThreadPoolExecutor(2) as pool:
        together = list(pool.map(page, ["a", "b"]))
    assert together == [page("a"), page("b")]
    assert together[0] != together[1]


def test_an_older_change_gives_way_to_a_newer_one(server):
    def change(i):
        time.sleep(0.01 * i)
        return server.ask("POST", "/ask/answer", {"document": {**DEMO, "title": f"change {i}"}}, X_Faying_Page="fast")

    with ThreadPoolExecutor(30) as pool:
        got = list(pool.map(change, range(30)))
    assert {status for status, _ in got} == {200, 409}
    assert got[-1][0] == 200
    assert json.loads(got[-1][1])["title"] == "change 29"
    assert sum(status == 409 for status, _ in got) >= 10


def test_a_run_past_its_time_is_ended(tmp_path):
    async def run():
        engine = Engine(tmp_path, limit=30.0)
        assert "rows" in await engine.ask("p", "answer", document=DEMO)
        first = engine._process.pid
        engine._limit = 0.001
        with pytest.raises(TimeoutError):
            await engine.ask("p", "answer", document=DEMO)
        assert not Path(f"/proc/{first}").exists()
        engine._limit = 30.0
        assert "rows" in await engine.ask("p", "answer", document=DEMO)
        last = engine._process.pid
        await engine.stop()
        assert not Path(f"/proc/{last}").exists()

    asyncio.run(run())


@pytest.mark.parametrize("ending", [signal.SIGINT, signal.SIGTERM, signal.SIGKILL])
def test_stopping_leaves_nothing_behind(tmp_path, ending):
    with served(tmp_path) as running:
        running.answer(DEMO)
        children = running.children()
        assert children
        running.process.send_signal(ending)
        running.process.wait(15)
        deadline = time.monotonic() + 15
        while any(Path(f"/proc/{pid}").exists() for pid in children) and time.monotonic() < deadline:
            time.sleep(0.1)
        assert not [pid for pid in children if Path(f"/proc/{pid}").exists()]
        with pytest.raises(OSError, match=r"refused"):
            socket.create_connection(("127.0.0.1", running.port), timeout=5).close()
    assert os.listdir(tmp_path) == []


def test_a_file_in_the_folder_is_not_taken_for_a_module(tmp_path):
    for name in ("fatigue", "json", "numpy"):
        (tmp_path / f"{name}.py").write_text("raise SystemExit(3)", encoding="utf-8")
    with served(tmp_path) as running:
        assert running.answer(DEMO)["rows"]
