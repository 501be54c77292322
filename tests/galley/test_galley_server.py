"""The server of a galley, asked over real sockets: pages, news, and every kind of abuse within bounded time."""

from __future__ import annotations

import json
import re
import socket
import threading
import time
from concurrent.futures import ThreadPoolExecutor

import pytest
from support.folders import FILES

from sheetgen.faults import MachineError
from sheetgen.galley import requests, server
from sheetgen.galley.server import CONNECTIONS, STREAMS, Server

pytestmark = pytest.mark.xdist_group("galley")


def test_a_page_follows_the_galley(galley):
    status, headers, body = galley.ask("/materials/copper.html")
    page = body.decode()
    assert (status, headers["content-type"]) == (200, "text/html; charset=utf-8")
    assert f'data-since="{galley.workshop.token}.{galley.workshop.news.number}"' in page
    assert page.index('<aside id="galley-faults"') < page.index("<header")
    assert 'id="galley-faults" role="status" aria-live="polite" hidden>' in page


def test_the_policy_of_a_page_moves_to_the_header_and_allows_news(galley):
    _, headers, body = galley.ask("/materials/copper.html")
    policy = headers["content-security-policy"]
    assert b"http-equiv" not in body
    assert "default-src 'none'" in policy and "connect-src 'self'" in policy and "frame-ancestors 'none'" in policy
    assert "file:" not in policy and not re.search(r"script-src[^;]*unsafe", policy)


@pytest.mark.parametrize(
    "path", ["/", "/style/handbook.css", "/-/galley.js", "/-/galley.css", "/data/handbook.json", "/no"]
)
def test_every_answer_is_guarded(galley, path):
    _, headers, _ = galley.ask(path)
    assert headers["x-content-type-options"] == "nosniff"
    assert headers["cache-control"] == "no-store"
    assert headers["cross-origin-resource-policy"] == "same-origin"
    assert "default-src 'none'" in headers["content-security-policy"]


def test_files_are_those_that_were_published(galley):
    for path in ("style/handbook.css", "data/handbook.csv", "figures/copper/heat.svg"):
        status, headers, body = galley.ask(f"/{path}")
        assert (status, body) == (200, (galley.workshop.site / path).read_bytes())
        assert int(headers["content-length"]) == len(body)


def test_head_has_no_body(galley):
    status, headers, body = galley.ask(f"HEAD / HTTP/1.1\r\nHost: localhost:{galley.port}\r\n\r\n".encode())
    assert (status, body) == (200, b"") and int(headers["content-length"]) > 1000


def test_what_is_not_in_the_site_is_not_served(galley):
    site = galley.workshop.site
    (site / "secret.txt").write_text("secret")
    (site / "passwd.html").symlink_to("/etc/passwd")
    try:
        for path in ("/secret.txt", "/passwd.html", "/manifest.json", "/materials", "/.site.lock", "/no.html"):
            status, _, body = galley.ask(path)
            assert status == 404 and b"secret" not in body and b"root:" not in body
    finally:
        (site / "secret.txt").unlink()
        (site / "passwd.html").unlink()


def test_a_published_name_that_became_a_link_is_not_followed(galley):
    page = galley.workshop.site / "methods.html"
    kept = page.read_bytes()
    page.unlink()
    page.symlink_to("/etc/passwd")
    try:
        status, _, body = galley.ask("/methods.html")
        assert status == 404 and b"root:" not in body
    finally:
        page.unlink()
        page.write_bytes(kept)


@pytest.mark.parametrize("path", ["/../records/copper.yaml", "/%2e%2e/records/copper.yaml", "/..%2f..%2fetc/passwd"])
def test_traversal(galley, path):
    status, _, body = galley.ask(path)
    assert (status, body) == (400, b"400 no path of a site\n")


@pytest.mark.parametrize("host", ["attacker.example", "localhost", "127.0.0.1:1", "attacker.example:{port}"])
def test_forged_host(galley, host):
    status, _, body = galley.ask("/", host=host.format(port=galley.port))
    assert status == 421 and b"<html" not in body


@pytest.mark.parametrize(
    "lines, status",
    [
        ("", 400),
        ("Host: localhost:{port}\r\nHost: attacker.example\r\n", 400),
        ("Host: localhost:{port}\r\nOrigin: http://attacker.example\r\n", 403),
        ("Host: localhost:{port}\r\nSec-Fetch-Site: cross-site\r\n", 403),
        ("Host: localhost:{port}\r\nContent-Length: 9999999999\r\n", 413),
        ("Host: localhost:{port}\r\nTransfer-Encoding: chunked\r\n", 413),
    ],
)
def test_forged_heads(galley, lines, status):
    head = f"GET /index.html HTTP/1.1\r\n{lines.format(port=galley.port)}\r\n"
    assert galley.ask(head.encode())[0] == status


@pytest.mark.parametrize(
    "method, status", [("POST", 405), ("PUT", 405), ("DELETE", 405), ("OPTIONS", 405), ("BREW", 405)]
)
def test_other_methods(galley, method, status):
    answer = galley.ask(f"{method} / HTTP/1.1\r\nHost: localhost:{galley.port}\r\n\r\n".encode())
    assert (answer[0], answer[1]["allow"]) == (status, "GET, HEAD")


def test_garbage(galley):
    for head in (
        b"\r\n\r\n",
        b"\x16\x03\x01\x02\x00\x01\x00",
        b"GET\r\n\r\n",
        b"GET / HTTP/9.9\r\n\r\n",
        b"\x00" * 100,
    ):
        with socket.create_connection(("127.0.0.1", galley.port), timeout=10) as connection:
            connection.sendall(head)
            connection.shutdown(socket.SHUT_WR)
            answer = b"".join(iter(lambda: connection.recv(65536), b""))
        assert b"<html" not in answer
    assert galley.ask("/")[0] == 200


@pytest.mark.parametrize(
    "head",
    [
        b"GET /" + b"x" * 1_000_000 + b" HTTP/1.1\r\n\r\n",
        b"GET / HTTP/1.1\r\nHost: localhost\r\nX: " + b"x" * 1_000_000 + b"\r\n\r\n",
        b"GET / HTTP/1.1\r\n" + b"X: x\r\n" * 100_000 + b"\r\n",
    ],
)
def test_huge_requests_are_cut_off(galley, head):
    began = time.monotonic()
    with socket.create_connection(("127.0.0.1", galley.port), timeout=10) as connection:
        try:
            connection.sendall(head)
            answer = connection.recv(65536)
        except ConnectionError:  # the server closed before it had read everything, as it should
            answer = b""
    assert b"200" not in answer[:20]
    assert time.monotonic() - began < 8
    assert galley.ask("/")[0] == 200


def test_slow_clients_are_cut_off_however_they_dawdle(galley, monkeypatch):
    monkeypatch.setattr(requests.BoundedReader.__init__, "__defaults__", (requests.HEADER_BYTES, 0.5))
    silent = socket.create_connection(("127.0.0.1", galley.port), timeout=10)
    dripping = socket.create_connection(("127.0.0.1", galley.port), timeout=10)
    with silent, dripping:
        began = time.monotonic()
        with pytest.raises(ConnectionError):
            while time.monotonic() - began < 8:
                dripping.send(b"G")
                time.sleep(0.05)
        assert silent.recv(100) == b""
        assert time.monotonic() - began < 8


def test_many_clients_at_once(galley):
    with ThreadPoolExecutor(32) as clients:
        answers = list(clients.map(lambda _: galley.ask("/materials/sodium.html", 30)[0], range(200)))
    assert set(answers) <= {200, 503}
    assert answers.count(200) > 100


def test_more_connections_than_there_is_room_for(galley):
    held = [socket.create_connection(("127.0.0.1", galley.port), timeout=10) for _ in range(CONNECTIONS)]
    try:
        deadline = time.monotonic() + 4
        while (status := galley.ask("/")[0]) != 503 and time.monotonic() < deadline:
            time.sleep(0.02)
        assert status == 503
    finally:
        for connection in held:
            connection.close()
    deadline = time.monotonic() + 5
    while galley.ask("/")[0] != 200:
        assert time.monotonic() < deadline
        time.sleep(0.05)


class Stream:
    """A page that waits for news."""

    def __init__(self, galley, since: str):
        head = f"GET /-/events?since={since} HTTP/1.1\r\nHost: localhost:{galley.port}\r\n\r\n"
        self.connection = socket.create_connection(("127.0.0.1", galley.port), timeout=15)
        self.connection.sendall(head.encode())
        self.lines = self.connection.makefile(encoding="utf-8", newline="\n")
        self.status = int(self.lines.readline().split()[1])
        while self.lines.readline().strip():
            pass

    def __enter__(self):
        return self

    def __exit__(self, *_):
        self.lines.close()
        self.connection.close()

    def news(self) -> tuple[str, dict]:
        """Id and data of the next news."""
        id = ""
        for line in self.lines:
            if line.startswith("id: "):
                id = line[4:].strip()
            if line.startswith("data: "):
                return id, json.loads(line[6:])
        raise EOFError


def test_a_save_is_news_for_the_page_that_shows_it(galley):
    workshop = galley.workshop
    before = workshop.news.number
    with Stream(galley, f"{workshop.token}.{before}") as page:
        assert page.status == 200
        text = FILES["copper.yaml"].replace("3.6149(3)", f"3.62{before % 10}(3)")
        (galley.folder / "copper.yaml").write_text(text, encoding="utf-8")
        threading.Thread(target=workshop.press).start()
        id, news = page.news()
    assert id == f"{workshop.token}.{before + 1}"
    assert "materials/copper.html" in news["changed"] and "materials/sodium.html" not in news["changed"]
    assert news["faults"] == []


def test_faults_are_news_and_stand_in_every_page_until_they_are_mended(galley):
    workshop = galley.workshop
    before = workshop.news.number
    (galley.folder / "copper.yaml").write_text("name: <b>Copper</b>\nformla: Cu\n", encoding="utf-8")
    workshop.press()
    try:
        with Stream(galley, f"{workshop.token}.{before}") as page:
            _, news = page.news()
        place = f"{galley.folder}/copper.yaml:2:1"
        assert news["changed"] == [] and place in [fault["place"] for fault in news["faults"]]
        body = galley.ask("/materials/copper.html")[2].decode()
        assert f"<code>{place}</code>" in body and "last good edition" in body
        assert "<h1" in body and 'aria-live="polite">' in body
    finally:
        (galley.folder / "copper.yaml").write_text(FILES["copper.yaml"], encoding="utf-8")
        workshop.press()
    assert "<code>" not in galley.ask("/materials/copper.html")[2].decode().split("</aside>")[0]


def test_a_page_of_an_earlier_galley_is_told_to_reload(galley):
    for since in ("00000000.3", "", f"{galley.workshop.token}.x", "%00"):
        with Stream(galley, since) as page:
            assert page.news()[1]["changed"] is None


def test_more_pages_than_there_is_room_for(galley):
    since = f"{galley.workshop.token}.{galley.workshop.news.number}"
    pages = []
    try:
        for _ in range(STREAMS):
            pages.append(Stream(galley, since))
        with Stream(galley, since) as further:
            assert further.status == 503
        assert galley.ask("/")[0] == 200
    finally:
        for page in pages:
            page.__exit__()


def test_only_this_machine_can_reach_it(galley):
    assert galley.server.http.server_address[0] == "127.0.0.1"
    addresses = {info[4][0] for info in socket.getaddrinfo(socket.gethostname(), None, socket.AF_INET)}
    for address in addresses - {"127.0.0.1", "127.0.1.1"}:
        with pytest.raises(OSError):
            socket.create_connection((address, galley.port), timeout=2)


def test_a_port_that_is_taken(galley):
    with pytest.raises(MachineError) as refused:
        Server(galley.port, galley.workshop)
    assert str(refused.value) == f"port {galley.port} is in use; choose another with --port, or 0 for a free one"


def test_before_the_first_good_press(workshop, monkeypatch):
    (workshop.folder / "copper.yaml").write_text("name: [\n", encoding="utf-8")
    waiting = Server(0, workshop)
    monkeypatch.setattr(server, "HEARTBEAT", 0.2)
    workshop.press()
    waiting.start()
    try:
        with socket.create_connection(("127.0.0.1", waiting.http.server_address[1]), timeout=10) as connection:
            connection.sendall(f"GET / HTTP/1.1\r\nHost: {waiting.address[7:-1]}\r\n\r\n".encode())
            answer = b"".join(iter(lambda: connection.recv(65536), b"")).decode()
    finally:
        waiting.stop()
    assert answer.startswith("HTTP/1.0 503 ")
    assert f"<code>{workshop.folder}/copper.yaml:" in answer and "/-/galley.js" in answer


def test_stopping_lets_go_of_the_port_with_pages_open(workshop):
    workshop.press()
    running = Server(0, workshop)
    port = running.http.server_address[1]
    running.start()
    with socket.create_connection(("127.0.0.1", port), timeout=10) as page:
        page.sendall(f"GET /-/events HTTP/1.1\r\nHost: localhost:{port}\r\n\r\n".encode())
        assert page.recv(100).startswith(b"HTTP/1.0 200")
        began = time.monotonic()
        running.stop()
        assert time.monotonic() - began < 5
    again = Server(port, workshop)
    again.stop()
