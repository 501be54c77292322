"""Notes in Markdown, whatever they say."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from sheetgen.pages.notes import notes

PIECES = st.sampled_from(
    """<script> </script> <img_src=x_onerror=alert(1)> <svg/onload=alert(1)> [a](javascript:x) ![b](http://c) <a_href="
    data:text/html, onclick= <!-- --> <style> <iframe> & &lt; &#60;script&#62; `code` **bold** # ## ### | --- > 1. *
    <math><mi_xlink:href=javascript:x> javascript&colon;alert(1) java_script: <base_href=//evil>
    <form_action=x>""".split()  # noqa: SIM905
)
ALLOWED = """p br hr em strong b i code pre blockquote ul ol li dl dt dd a sup sub table thead tbody tr th td h3 h4 h5
    h6 abbr del ins small""".split()  # noqa: SIM905
FORBIDDEN = re.compile(rf"<(?!/?(?:{'|'.join(ALLOWED)})\b)")


def test_markdown_is_set():
    html = notes("The *4s* electron.\n\n| a | b |\n|---|---|\n| 1 | 2 |")
    assert "<em>4s</em>" in html and "<td>2</td>" in html


def test_headings_go_one_level_under_the_heading_above_and_skip_none():
    assert re.findall(r"<h(\d)", notes("# A\n\n#### B\n\n# C")) == ["3", "4", "3"]


@pytest.mark.parametrize("link", ["https://example.org/a", "mailto:a@example.org", "#fermi_energy", "../methods.html"])
def test_harmless_links_stay(link):
    assert f'href="{link}"' in notes(f"[a]({link})")


@pytest.mark.parametrize(
    "text",
    [
        "[a](javascript:alert(1))",
        "[a](JaVaScRiPt:alert(1))",
        "[a](data:text/html,x)",
        "[a](//evil.example)",
        "[a](/etc/passwd)",
        "![a](https://evil.example/x.png)",
        "<img src=x onerror=alert(1)>",
        "<a href='vbscript:x'>a</a>",
    ],
)
def test_harmful_links_and_pictures_go(text):
    html = notes(text)
    assert "href" not in html and "src" not in html and "<img" not in html


@given(st.lists(PIECES, max_size=30).map(" ".join).map(lambda text: text.replace("_", " ")))
def test_nothing_harmful_survives_any_text(text):
    html = notes(text)
    assert not FORBIDDEN.search(html), html
    for attribute in re.findall(r"<[a-z0-9]+\s[^>]*>", html):
        assert not re.search(r"\son\w+\s*=", attribute), html
        assert not re.search(r'href="\s*(?!https?:|mailto:|#|[\w.])', attribute), html
        assert "javascript" not in attribute.lower().replace("\t", ""), html
