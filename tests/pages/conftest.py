"""A small handbook with everything that pages show, hostile texts included, loaded as any other and laid out once."""

from __future__ import annotations

import re
from html.parser import HTMLParser
from types import SimpleNamespace

import pytest

EVIL = "<script>alert(1)</script><img src=x onerror=alert(2)>"

HANDBOOK = """\
title: "Small & <b>bold</b> handbook"
group: Marrow Point Thin-Film Group
edition: "2026.1"
licence: CC-BY-4.0
language: en-GB
contact: handbook@marrow-point.example
paper: letter
units: {fermi_velocity: km/s, electron_thermal_conductivity: W/(cm K), hall_coefficient: mm^3/C}
"""

SOURCES = r"""
@article{lattice1969, author = {Straumanis, M. E. and Yu, L. S.}, title = {Lattice parameters of copper},
  journal = {Acta}, year = {1969}, doi = {10.1107/S0567739469001549}}
@article{resistance1979, author = {Matula, R. A.}, title = {Electrical resistivity of copper}, journal = {JPCRD},
  year = {1979}}
@misc{evil, author = {<script>alert(3)</script>}, title = {<img src=x onerror=alert(4)> "quoted" & more},
  year = {2000}, note = {<iframe src=https://evil.example></iframe>}}
"""

COPPER = """\
name: Copper
formula: Cu
structure:
  lattice: fcc
  a: {value: 3.6149(2) Å, at: 293 K, from: lattice1969}
electrons:
  valence: 1
  note: one s electron per atom
measured:
  resistivity:
    - {value: 1.678(9) µΩ cm, at: 293 K, from: resistance1979}
    - {value: 0.215(8) µΩ cm, at: 80 K, from: resistance1979, recalled: true, note: quoted from memory}
  heat coefficient: {value: 0.695(10) mJ/(mol K²), from: [resistance1979, evil]}
  thermal conductivity: {value: 401(4) W/(m K), at: 293 K, from: resistance1979}
  hall coefficient: {value: -5.4(4)e-11 m³/C, at: 293 K, from: resistance1979}
  debye temperature: {value: 343 K, from: resistance1979}
  work function: {value: 4.65(13) eV, from: resistance1979}
  interband threshold: {value: 2.1 eV, from: resistance1979}
  refractive index:
    - {photon energy: 1 eV, n: 0.1189, k: 8.619, from: resistance1979}
    - {photon energy: 3 eV, n: 1.198, k: 2.158, from: resistance1979}
specimens:
  - {name: F-12, form: film, thickness: 40(2) nm, specularity: 0.1(1), grain size: 32(4) nm, grain reflection: 0.25(5),
     resistivity: {value: 3.5(1) µΩ cm, at: 293 K}, note: sputtered, invented: true}
cautions:
  - {text: Powder harms water life., hazard: [H410, H228]}
review: {state: reviewed, by: AB, date: 2026-11-02}
notes: |
  # Why one electron

  The *4s* electron, see [the numbers](#fermi_energy).
"""

HOSTILE = f"""\
name: "Hostile {EVIL}"
formula: Pb
structure:
  lattice: fcc
  a: {{value: 4.9508(5) Å, from: evil, note: "{EVIL}"}}
electrons: {{valence: 4, note: "{EVIL}"}}
measured:
  resistivity: {{value: 20.8(3) µΩ cm, at: 293 K, from: evil, recalled: true}}
specimens:
  - {{name: "S {EVIL}", form: film, thickness: 40 nm, note: "{EVIL}", invented: true}}
cautions: [ {{text: "{EVIL}", hazard: [H360FD]}} ]
review: {{state: draft, by: "{EVIL}", date: 2026-11-02}}
notes: |
  # Top

  ### Skips a level

  {EVIL} <a href="javascript:alert(6)" onclick="alert(7)">x</a> [y](javascript:alert(8)) ![z](https://evil.example/z.png)
  <style>body {{ display: none }}</style> <iframe src="https://evil.example"></iframe> [out](//evil.example)
  <svg><a xlink:href="javascript:alert(9)"><text>t</text></a></svg> [good](https://example.org/page)
"""

WELL = """\
name: Quantum well
formula: GaAs
electrons: {dimension: 2, density: 4.0(1)e11 1/cm², effective mass: 0.067, background permittivity: 12.9}
"""

SVG = (
    b'<svg xmlns="http://www.w3.org/2000/svg" width="85.0mm" height="59.5mm" viewBox="0 0 85 59.5">'
    b"<title>t</title></svg>"
)
FIGURE = SimpleNamespace(id="parabola", title="Parabola", description=f'Energy "against" {EVIL}', svg=SVG, csv=b"k,E\n")


@pytest.fixture(scope="session")
def small_handbook(tmp_path_factory):
    """Three records and an imprint, read and derived by the real road."""
    from sheetgen.handbook import Handbook

    folder = tmp_path_factory.mktemp("small")
    texts = {
        "handbook.yaml": HANDBOOK,
        "sources.bib": SOURCES,
        "copper.yaml": COPPER,
        "hostile.yaml": HOSTILE,
        "well.yaml": WELL,
    }
    for name, text in texts.items():
        (folder / name).write_text(text, encoding="utf-8")
    return Handbook.load(folder)


@pytest.fixture(scope="session")
def site(small_handbook) -> dict[str, bytes]:
    """Everything that is laid out for the small handbook, with the data files and figures that others write."""
    from sheetgen.documents import documents
    from sheetgen.pages import lay_out

    figures = {"copper": [FIGURE], "hostile": [FIGURE]}
    return {**dict(documents(small_handbook, figures)), **dict(lay_out(small_handbook, figures))}


class Page(HTMLParser):
    """A page read back: its tags with attributes in order, its text, and whether every element was closed in order."""

    VOID = frozenset("meta link img br wbr col hr input".split())  # noqa: SIM905

    def __init__(self, content: bytes):
        super().__init__(convert_charrefs=True)
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.open: list[str] = []
        self.unbalanced: list[str] = []
        self.words: list[str] = []
        self.data: list[str] = []
        self.feed(content.decode())
        self.close()

    def handle_starttag(self, tag, attrs):
        self.tags.append((tag, dict(attrs)))
        if tag not in self.VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag, attrs):
        self.tags.append((tag, dict(attrs)))

    def handle_endtag(self, tag):
        if self.open and self.open[-1] == tag:
            self.open.pop()
        else:
            self.unbalanced.append(f"</{tag}> at line {self.getpos()[0]}")

    def handle_data(self, data):
        (self.data if self.open and self.open[-1] in ("script", "style") else self.words).append(data)

    @property
    def text(self) -> str:
        """What a reader sees, with plain single spaces."""
        return re.sub(r"\s+", " ", "".join(self.words))

    def all(self, tag: str) -> list[dict[str, str | None]]:
        """The attributes of every element of a kind."""
        return [attributes for name, attributes in self.tags if name == tag]

    @property
    def anchors(self) -> list[str]:
        """Every id of the page."""
        return [attributes["id"] for _, attributes in self.tags if attributes.get("id")]


@pytest.fixture(scope="session")
def pages(site) -> dict[str, Page]:
    """Every HTML page, read back."""
    return {path: Page(content) for path, content in site.items() if path.endswith(".html")}
