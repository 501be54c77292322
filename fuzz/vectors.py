"""Puts the attacks of a registry package into notes: `pip install brs-kb==4.0.2`, then `python fuzz/vectors.py`.

Each is laid out as a note of its own and looked through as the fuzzer looks; with --browser all stand on pages that a
headless Chromium opens without their policy, and the line at the end says how many ran.
"""

from __future__ import annotations

import argparse
import sys
import tempfile
from html import escape
from pathlib import Path

HERE = Path(__file__).parent
EACH = 100  # attacks on a page
WATCH = "for (const name of ['alert','confirm','prompt','print']) window[name] = () => (window.ran = name);"


def main() -> int:
    """Look through every attack; the exit status is 1 where one gets through."""
    options = argparse.ArgumentParser(description=__doc__.partition("\n")[0])
    options.add_argument("--browser", help="path of a Chromium")
    given = options.parse_args()
    from brs_kb import get_all_payloads

    sys.path.insert(0, str(HERE))
    import targets

    attacks = sorted({entry["payload"] for entry in get_all_payloads().values()})
    for attack in attacks:
        targets.markdown(attack.encode("utf-8", "replace"))
    print(f"{len(attacks)} attacks laid out as notes, none of which kept what a page must not hold")
    return opened(attacks, given.browser) if given.browser else 0


def opened(attacks: list[str], browser: str) -> int:
    """Open pages on which the attacks stand as notes and as escaped text; returns 1 where one of them ran."""
    from playwright.sync_api import sync_playwright

    from sheetgen.pages.notes import notes

    ran, asked = [], []
    with sync_playwright() as playwright, tempfile.TemporaryDirectory() as folder:
        page = playwright.chromium.launch(executable_path=browser, args=["--no-sandbox"]).new_page()
        page.add_init_script(WATCH)
        page.on("dialog", lambda dialog: (ran.append(dialog.message), dialog.dismiss()))
        page.on("request", lambda request: asked.append(request.url))
        for start in range(0, len(attacks), EACH):
            texts = (f"<div>{notes(text)}</div><p title='{escape(text)}'>{escape(text)}</p>"
                     for text in attacks[start : start + EACH])  # fmt: skip
            path = Path(folder) / f"{start}.html"
            path.write_text(f"<!doctype html><meta charset=utf-8>{''.join(texts)}", encoding="utf-8", errors="replace")
            page.goto(path.as_uri())
            ran += filter(None, [page.evaluate("() => window.ran || ''")])
    outside = [url for url in asked if not url.startswith("file:")]
    print(f"{len(asked)} pages opened: {len(ran)} scripts ran, {len(outside)} requests to outside")
    return int(bool(ran or outside))


if __name__ == "__main__":
    sys.exit(main())
