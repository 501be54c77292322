"""A galley in this process: a small handbook, its workshop and its server."""

from __future__ import annotations

import socket
from collections.abc import Iterator
from types import SimpleNamespace

import pytest
from support.folders import write_small_handbook

from sheetgen.galley.server import Server
from sheetgen.galley.workshop import Workshop


@pytest.fixture
def workshop(tmp_path):
    """A workshop that has not pressed yet."""
    folder = write_small_handbook(tmp_path / "records")
    return Workshop(folder, tmp_path / "desk" / "site")


@pytest.fixture(scope="module")
def galley(tmp_path_factory) -> Iterator[SimpleNamespace]:
    """A galley that serves a pressed handbook: `folder`, `workshop`, `port` and `ask`."""
    base = tmp_path_factory.mktemp("galley")
    workshop = Workshop(write_small_handbook(base / "records"), base / "desk" / "site")
    server = Server(0, workshop)
    workshop.press()
    server.start()
    port = server.http.server_address[1]

    def ask(head: bytes | str, seconds: float = 10, host: str | None = None) -> tuple[int, dict[str, str], bytes]:
        """Send a request as it is (a path: a GET of it) and read until the server closes."""
        if isinstance(head, str):
            head = f"GET {head} HTTP/1.1\r\nHost: {host or f'127.0.0.1:{port}'}\r\n\r\n".encode()
        with socket.create_connection(("127.0.0.1", port), timeout=seconds) as connection:
            connection.sendall(head)
            answer = b"".join(iter(lambda: connection.recv(65536), b""))
        top, _, body = answer.partition(b"\r\n\r\n")
        status, *lines = top.decode("latin-1").split("\r\n")
        headers = {name.lower(): value for name, _, value in (line.partition(": ") for line in lines)}
        return int(status.split()[1]) if status else 0, headers, body

    yield SimpleNamespace(folder=workshop.folder, workshop=workshop, port=port, ask=ask, server=server)
    server.stop()
