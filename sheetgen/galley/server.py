"""The HTTP side of a galley: loopback only, GET and HEAD, everything bounded."""

from __future__ import annotations

import errno
import io
import json
import socket
import threading
from contextlib import suppress
from http import HTTPStatus
from http.server import BaseHTTPRequestHandler, ThreadingHTTPServer
from pathlib import PurePosixPath
from urllib.parse import parse_qs, urlsplit

from sheetgen.faults import MachineError
from sheetgen.galley import leaves
from sheetgen.galley.requests import BoundedReader, refusal, site_path
from sheetgen.galley.workshop import News, Workshop

LOOPBACK = "127.0.0.1"
CONNECTIONS = 64
STREAMS = 32  # of the connections: pages that wait for news
SEND_SECONDS = 20.0
HEARTBEAT = 5.0  # seconds; a page that is gone is noticed when nothing can be sent to it
MEDIA_TYPES = {
    ".html": "text/html; charset=utf-8", ".css": "text/css; charset=utf-8", ".js": "text/javascript; charset=utf-8",
    ".svg": "image/svg+xml", ".json": "application/json", ".csv": "text/csv; charset=utf-8", ".woff2": "font/woff2",
    ".txt": "text/plain; charset=utf-8", ".atom": "application/atom+xml", ".pdf": "application/pdf",
    ".png": "image/png", ".bib": "text/plain; charset=utf-8", ".xml": "application/xml",
}  # fmt: skip
# A drawing that is opened by itself may style itself and do nothing else.
FILE_POLICY = "default-src 'none'; style-src 'unsafe-inline'; img-src data:; frame-ancestors 'none'"
HEADERS = {
    "X-Content-Type-Options": "nosniff",
    "Referrer-Policy": "no-referrer",
    "Cross-Origin-Resource-Policy": "same-origin",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cache-Control": "no-store",
    "Connection": "close",
}
BUSY = b"HTTP/1.0 503 Service Unavailable\r\nRetry-After: 1\r\nContent-Length: 0\r\nConnection: close\r\n\r\n"


class Server:
    """A galley's server in a thread of its own. Raises MachineError where the port cannot be had."""

    def __init__(self, port: int, workshop: Workshop):
        try:
            self.http = _Http((LOOPBACK, port), workshop)
        except OverflowError:
            raise MachineError(f"there is no port {port}; choose one from 1 to 65535 with --port") from None
        except OSError as refusal_:
            if refusal_.errno == errno.EADDRINUSE:
                raise MachineError(f"port {port} is in use; choose another with --port, or 0 for a free one") from None
            raise MachineError(f"port {port}: {(refusal_.strerror or str(refusal_)).lower()}") from None
        self.thread = threading.Thread(target=self.http.serve_forever, kwargs={"poll_interval": 0.2}, daemon=True)

    @property
    def address(self) -> str:
        """What to open in a browser."""
        return f"http://{LOOPBACK}:{self.http.server_address[1]}/"

    def start(self) -> None:
        """Begin to answer."""
        self.thread.start()

    def stop(self) -> None:
        """Answer nothing any more, and let go of the port."""
        self.http.stopping = True
        with self.http.workshop.changing:
            self.http.workshop.changing.notify_all()
        if self.thread.is_alive():
            self.http.shutdown()
            self.thread.join(timeout=5)
        self.http.server_close()


class _Http(ThreadingHTTPServer):
    daemon_threads = True
    block_on_close = False
    request_queue_size = 64

    def __init__(self, address: tuple[str, int], workshop: Workshop):
        self.workshop, self.stopping = workshop, False
        self.slots = threading.BoundedSemaphore(CONNECTIONS)
        self.streams = threading.BoundedSemaphore(STREAMS)
        super().__init__(address, _Request)

    def server_bind(self) -> None:
        """Bind without asking any name server what this machine is called."""
        self.socket.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        self.socket.bind(self.server_address)
        self.server_address = self.socket.getsockname()
        self.server_name, self.server_port = LOOPBACK, self.server_address[1]

    def process_request(self, request: socket.socket, client_address: object) -> None:
        """Answer in a thread of its own, as long as there are not too many."""
        if self.slots.acquire(blocking=False):
            super().process_request(request, client_address)
            return
        with suppress(OSError):
            request.settimeout(0.1)
            request.send(BUSY)
        self.shutdown_request(request)

    def process_request_thread(self, request: socket.socket, client_address: object) -> None:
        """One connection from its first byte to its last."""
        try:
            super().process_request_thread(request, client_address)
        finally:
            self.slots.release()

    def handle_error(self, request: object, client_address: object) -> None:
        """A client that goes away in the middle of an answer is none of our concern."""


class _Request(BaseHTTPRequestHandler):
    """One request; the connection is closed after it."""

    server: _Http
    protocol_version = "HTTP/1.0"
    server_version, sys_version = "sheetgen", ""

    def setup(self) -> None:
        """Read within bounds."""
        super().setup()
        self.bounded = BoundedReader(self.connection)
        self.rfile = io.BufferedReader(self.bounded, 2048)

    def parse_request(self) -> bool:
        """The head of the request, and whether it may be answered at all."""
        if not super().parse_request():
            return False
        self.connection.settimeout(SEND_SECONDS)
        if self.bounded.exceeded:
            self.send_error(HTTPStatus.REQUEST_HEADER_FIELDS_TOO_LARGE)
            return False
        if self.command not in ("GET", "HEAD"):
            self.send_error(HTTPStatus.METHOD_NOT_ALLOWED, "only GET and HEAD are answered")
            return False
        if refused := refusal(self.headers, self.server.server_port):
            self.send_error(*refused)
            return False
        return True

    def do_GET(self) -> None:
        """A page, a file, something of the galley itself, or the stream of news."""
        path = site_path(self.path)
        if path is None:
            self.send_error(HTTPStatus.BAD_REQUEST, "no path of a site")
        elif path == leaves.EVENTS:
            self._stream()
        elif path in leaves.ASSETS:
            self._send(HTTPStatus.OK, leaves.asset(path), path)
        else:
            self._send_of_site(path)

    do_HEAD = do_GET  # noqa: N815 (the name that the library looks for)

    def send_error(self, code: int, message: str | None = None, explain: str | None = None) -> None:
        """A refusal in one line of plain text."""
        status = HTTPStatus(code)
        self.close_connection = True
        with suppress(OSError):
            self._send(status, f"{status.value} {message or status.phrase.lower()}\n".encode(), "refusal.txt")

    def log_message(self, format: str, *arguments: object) -> None:
        """Say nothing: the terminal belongs to the faults."""

    def _send_of_site(self, path: str) -> None:
        # News first, page second: a change in between reloads the page once more, and is never missed.
        news = self.server.workshop.news
        data = self._file(path, news)
        status = HTTPStatus.OK
        if data is None:
            wanted_page = path.endswith(".html")
            if news.published and not wanted_page:
                self.send_error(HTTPStatus.NOT_FOUND, "not in this site")
                return
            status = HTTPStatus.NOT_FOUND if news.published else HTTPStatus.SERVICE_UNAVAILABLE
            said = "The handbook has no such page." if news.published else "No edition could be pressed yet."
            data, path = leaves.bare_page("Nothing here yet", said), "bare.html"
        if not path.endswith(".html"):
            self._send(status, data, path)
            return
        data, policy = leaves.with_galley(data, f"{self.server.workshop.token}.{news.number}", news.faults)
        self._send(status, data, path, policy)

    def _file(self, path: str, news: News) -> bytes | None:
        """The content of a published file; None for anything else, whatever the path may lead to."""
        site = self.server.workshop.site
        if path not in news.published:
            return None
        try:
            inside = site.resolve(strict=True) / path
            return inside.read_bytes() if inside.resolve(strict=True) == inside else None
        except (OSError, ValueError):
            return None

    def _send(self, status: HTTPStatus, data: bytes, path: str, policy: str = FILE_POLICY) -> None:
        self.send_response(status)
        kind = MEDIA_TYPES.get(PurePosixPath(path).suffix, "application/octet-stream")
        for name, value in {**HEADERS, "Content-Type": kind, "Content-Security-Policy": policy}.items():
            self.send_header(name, value)
        if status == HTTPStatus.METHOD_NOT_ALLOWED:
            self.send_header("Allow", "GET, HEAD")
        self.send_header("Content-Length", str(len(data)))
        self.end_headers()
        if self.command != "HEAD":
            self.wfile.write(data)

    # --- news --------------------------------------------------------------------------------------------------------

    def _stream(self) -> None:
        if not self.server.streams.acquire(blocking=False):
            self.send_error(HTTPStatus.SERVICE_UNAVAILABLE, "too many pages are open")
            return
        try:
            self._send_news()
        finally:
            self.server.streams.release()

    def _send_news(self) -> None:
        """Server-sent events (HTML Living Standard, 9.2), from what the page has seen on."""
        self.send_response(HTTPStatus.OK)
        for name, value in {**HEADERS, "Content-Type": "text/event-stream"}.items():
            self.send_header(name, value)
        self.end_headers()
        if self.command == "HEAD":
            return
        workshop = self.server.workshop
        seen = self._seen()
        while not self.server.stopping:
            news = workshop.wait(-1 if seen is None else seen, HEARTBEAT)
            if seen is None or news.number > seen:
                self.wfile.write(_event(news, seen, workshop.token))
                seen = news.number
            else:
                self.wfile.write(b": still here\n\n")

    def _seen(self) -> int | None:
        """The number of the news that the page shows; None for those of another run."""
        stated = self.headers.get("Last-Event-ID") or parse_qs(urlsplit(self.path).query).get("since", [""])[0]
        token, _, number = stated.partition(".")
        fits = token == self.server.workshop.token and number.isascii() and number.isdigit() and len(number) < 10
        return int(number) if fits else None


def _event(news: News, seen: int | None, token: str) -> bytes:
    faults = [{"place": str(fault.place), "message": fault.message} for fault in news.faults]
    data = {"changed": None if seen is None else news.since(seen), "faults": faults}
    return f"id: {token}.{news.number}\nevent: news\ndata: {json.dumps(data)}\n\n".encode()
