"""What a browser does with a page, and which pages there are."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

# A closed port of this machine as proxy: whatever asks for something outside fails, and is recorded.
FLAGS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--proxy-server=http://127.0.0.1:9",
    "--proxy-bypass-list=127.0.0.1",
    "--font-render-hinting=none",
]

HERE = ("file:", "data:", "blob:", "http://127.0.0.1:")


@contextmanager
def watched_page(browser, **settings) -> Iterator[tuple]:
    """A page and the list of what goes wrong on it: errors, failed requests, requests to outside."""
    context = browser.new_context(**settings)
    page, troubles = context.new_page(), []

    def heard(said) -> None:
        if said.type in {"error", "warning"}:
            troubles.append(f"{said.text} ({said.location['url']})")

    def asked(request) -> None:
        if not request.url.startswith(HERE):
            troubles.append(f"outside: {request.url}")

    def failed(request) -> None:
        if request.failure != "net::ERR_ABORTED":  # given up by the browser itself, for the next page
            troubles.append(f"failed: {request.url} ({request.failure})")

    page.on("console", heard)
    page.on("request", asked)
    page.on("pageerror", lambda error: troubles.append(str(error)))
    page.on("requestfailed", failed)
    try:
        yield page, troubles
    finally:
        context.close()


def pages_of(site: Path) -> list[Path]:
    """Every page of the site, in order."""
    return sorted(site.rglob("*.html"))
