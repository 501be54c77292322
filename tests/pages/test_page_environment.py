"""Templates that are wrong say where."""

from __future__ import annotations

import pytest

from sheetgen.faults import FaultsError
from sheetgen.pages.environment import Press


@pytest.fixture
def press_with(tmp_path):
    def make(text: str) -> Press:
        (tmp_path / "own.html").write_text(text, encoding="utf-8")
        return Press([tmp_path])

    return make


@pytest.mark.parametrize(
    ("text", "line", "words"),
    [
        ("fine\n{{ nosuch }}\n", 2, "'nosuch' is undefined"),
        ("{{ given.nosuch }}", 1, "has no attribute 'nosuch'"),
        ("a\nb\n{% if %}", 3, "Expected an expression"),
        ("a\n{{ 'x'|nosuch }}", 2, "No filter named 'nosuch'"),
        ("\n\n{{ '\\\\nosuch'|formula }}", 3, "not a known command"),
        ("{{ 1 + 'a' }}", 1, "TypeError"),
        ("{{ 1 / 0 }}", 1, "ZeroDivisionError"),
        ("{% include 'missing.html' %}", 1, "there is no template 'missing.html'"),
    ],
)
def test_an_error_names_template_and_line(press_with, tmp_path, text, line, words):
    with pytest.raises(FaultsError) as caught:
        press_with(text).render("own.html", given={})
    (fault,) = caught.value.faults
    assert str(fault).startswith(f"{tmp_path / 'own.html'}:{line}: ")
    assert words in fault.message


def test_everything_is_escaped(press_with):
    assert press_with("{{ text }}").render("own.html", text="<b>&\"'") == b"&lt;b&gt;&amp;&#34;&#39;"


def test_a_groups_template_stands_before_ours(tmp_path):
    (tmp_path / "sources.html").write_text("ours no more", encoding="utf-8")
    assert Press([tmp_path]).render("sources.html") == b"ours no more"
