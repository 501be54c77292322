"""Which requests a galley answers: from a page of its own on this machine, for a path inside the site."""

from __future__ import annotations

import io
import socket
import time
from collections.abc import Mapping
from email.message import Message
from urllib.parse import unquote, urlsplit

HEADER_BYTES = 16_384
HEADER_SECONDS = 5.0
NAMES = ("127.0.0.1", "localhost", "[::1]")


class BoundedReader(io.RawIOBase):
    """Reads the head of a request from a socket: so many bytes and so many seconds in all, then it ends.

    A client that sends a byte now and then is cut off like one that sends nothing. `exceeded` says whether bytes
    were left unread.
    """

    def __init__(self, connection: socket.socket, limit: int = HEADER_BYTES, seconds: float = HEADER_SECONDS):
        self.connection, self.left = connection, limit
        self.deadline = time.monotonic() + seconds
        self.exceeded = False

    def readable(self) -> bool:
        """Always."""
        return True

    def readinto(self, buffer: bytearray | memoryview) -> int:
        """As many bytes as came, 0 at the end; raises TimeoutError when the time is over."""
        if self.left <= 0:
            self.exceeded = True
            return 0
        remaining = self.deadline - time.monotonic()
        if remaining <= 0:
            raise TimeoutError("the request took too long")
        self.connection.settimeout(remaining)
        count = self.connection.recv_into(memoryview(buffer)[: self.left])
        self.left -= count
        return count


def hosts(port: int) -> frozenset[str]:
    """The Host headers of requests that were meant for this galley."""
    suffixes = (f":{port}", "") if port == 80 else (f":{port}",)
    return frozenset(f"{name}{suffix}" for name in NAMES for suffix in suffixes)


def refusal(headers: Message | Mapping[str, str], port: int) -> tuple[int, str] | None:
    """Status and reason why a request is refused; None where it may be answered.

    A page of another site can make a browser call this address, by a name of its own that leads here or by a
    script: its Host or its Origin tells.
    """
    named = headers.get_all("Host", []) if isinstance(headers, Message) else [headers.get("Host", "")]
    if len(named) != 1:
        return 400, "one Host header is needed"
    allowed = hosts(port)
    if named[0].strip().lower() not in allowed:
        return 421, "this address serves only the machine it runs on"
    origin = headers.get("Origin")
    if origin is not None and origin.strip().lower() not in {f"http://{host}" for host in allowed}:
        return 403, "pages of other sites get nothing from here"
    if headers.get("Sec-Fetch-Site", "none") not in ("none", "same-origin"):
        return 403, "pages of other sites get nothing from here"
    if headers.get("Content-Length", "0").strip() != "0" or headers.get("Transfer-Encoding") is not None:
        return 413, "a request for a page has no body"
    return None


def site_path(target: str) -> str | None:
    """The path below the site that a request target names; None for one that can name nothing there."""
    if not target.startswith("/") or target.startswith("//"):
        return None
    try:
        path = unquote(urlsplit(target).path, errors="strict")
    except (UnicodeDecodeError, ValueError):
        return None
    path = f"{path}index.html" if path.endswith("/") else path
    parts = path.split("/")[1:]
    if any(part in ("", ".", "..") or "\\" in part or not part.isprintable() for part in parts):
        return None
    return "/".join(parts)
