"""A server of the published site."""

from __future__ import annotations

import threading
from collections.abc import Iterator
from functools import partial
from http.server import SimpleHTTPRequestHandler, ThreadingHTTPServer
from pathlib import Path

import pytest


class _Silent(SimpleHTTPRequestHandler):
    def log_message(self, *_words: object) -> None:
        """Say nothing: the tests look at what the browser reports."""


@pytest.fixture(scope="session")
def served_site(pressed_site: Path) -> Iterator[str]:
    """Address of the published site on this machine."""
    server = ThreadingHTTPServer(("127.0.0.1", 0), partial(_Silent, directory=str(pressed_site)))
    thread = threading.Thread(target=server.serve_forever)
    thread.start()
    yield f"http://127.0.0.1:{server.server_port}"
    server.shutdown()
    thread.join()
    server.server_close()
