"""What a galley adds to a page of the site: its script, its style, and the faults that keep it from a newer one."""

from __future__ import annotations

import re
from collections.abc import Sequence
from html import escape, unescape
from importlib import resources

from sheetgen.faults import Fault

_POLICY = re.compile(rb'<meta http-equiv="Content-Security-Policy" content="([^"]*)">\n?')
_BODY = re.compile(rb"<body[^>]*>")
STRICT = "default-src 'none'; style-src 'self'; script-src 'self'; base-uri 'none'; form-action 'none'"
OWN = "connect-src 'self'; frame-ancestors 'none'"
ASSETS = {"-/galley.js": "galley.js", "-/galley.css": "galley.css"}
EVENTS = "-/events"


def asset(path: str) -> bytes:
    """The script or the style sheet of the galley itself."""
    return (resources.files("sheetgen.galley") / ASSETS[path]).read_bytes()


def with_galley(page: bytes, since: str, faults: Sequence[Fault]) -> tuple[bytes, str]:
    """A page that follows the galley, and the content security policy for its header.

    The policy of the page itself moves to the header, with leave to ask the galley for news; `file:`, which is for
    pages opened from a disk, is left out.
    """
    stated = _POLICY.search(page)
    policy = unescape(stated[1].decode()) if stated else STRICT
    page = _POLICY.sub(b"", page, count=1)
    head = (
        f'<link rel="stylesheet" href="/-/galley.css">\n'
        f'<script src="/-/galley.js" defer data-since="{escape(since)}"></script>\n</head>'
    )
    page = page.replace(b"</head>", head.encode(), 1)
    page = _BODY.sub(lambda body: body[0] + b"\n" + _board(faults).encode(), page, count=1)
    return page, f"{policy.replace(' file:', '')}; {OWN}"


def bare_page(title: str, said: str) -> bytes:
    """A page for what the site does not have."""
    return (
        '<!doctype html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n'
        '<meta name="viewport" content="width=device-width, initial-scale=1">\n'
        f"<title>{escape(title)}</title>\n</head>\n<body>\n"
        f"<main>\n<h1>{escape(title)}</h1>\n<p>{escape(said)}</p>\n"
        '<p><a href="/index.html">All materials</a></p>\n</main>\n</body>\n</html>\n'
    ).encode()


def _board(faults: Sequence[Fault]) -> str:
    """The place on a page where faults stand; hidden while there are none."""
    items = "".join(f"<li><code>{escape(str(fault.place))}</code> {escape(fault.message)}</li>" for fault in faults)
    hidden = "" if faults else " hidden"
    said = "The records are at fault. What stands below is the last good edition."
    return f'<aside id="galley-faults" role="status" aria-live="polite"{hidden}><p>{said}</p><ul>{items}</ul></aside>'
