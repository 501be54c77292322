"""A handbook in which every text that a stranger can write is a vector."""

from __future__ import annotations

import json
from itertools import cycle
from pathlib import Path

from hostile.vectors import VECTORS, letters

SHORT = letters(VECTORS, 95)
FORMULA_SIGNS = ("=", "+", "-", "@")


def q(text: str) -> str:
    """A text in the double quotes of YAML."""
    return json.dumps(text, ensure_ascii=False)


def braced(text: str) -> str:
    """A text as a BibTeX field bears it."""
    return text.replace("{", "").replace("}", "").replace("\\", "\\textbackslash ")


def write_hostile_handbook(folder: Path, vectors: list[str] = SHORT, each: int = 4) -> Path:
    """Write records until each vector was a name, a note, a caution, a specimen, a source and a field of the imprint.

    `each` vectors stand in each text of a record.
    """
    folder.mkdir(parents=True)
    supply = cycle(vectors)
    some = lambda count=1: " ".join(next(supply) for _ in range(count))  # noqa: E731
    records = -(-len(vectors) // 2)
    sources = []
    for number in range(records):
        key = f"source{number}"
        sources.append(
            f"@article{{{key},\n author = {{{braced(some())}}},\n"
            f" title = {{{braced(vectors[number])} {braced(some())}}},\n"
            f" journal = {{{braced(some())}}},\n volume = {{{braced(some())}}}, number = {{{braced(some())}}},\n"
            f" pages = {{{braced(some())}}}, year = {{{braced(some())}}}, note = {{{braced(some())}}}\n}}\n"
        )
        pair = " ".join(vectors[2 * number : 2 * number + 2])[:195]
        pair = f"x {pair}" if pair.startswith(FORMULA_SIGNS) else pair
        (folder / f"m{number}.yaml").write_text(
            f"""\
name: {q(pair)}
formula: Cu
structure:
  lattice: fcc
  a: {{value: 3.6149(3) Å, at: 293 K, from: {key}, note: {q(some(each))}}}
electrons: {{valence: 1, note: {q(some(each))}}}
measured:
  resistivity: {{value: 1.678(9) µΩ cm, at: 293 K, from: {key}, note: {q(some(each))}}}
  debye temperature: {{value: 343 K, from: {key}}}
  heat coefficient: {{value: 0.695 mJ/(mol K²), note: {q(some(each))}}}
specimens:
  - {{name: {q("x " + some())}, form: film, thickness: 40 nm,
     grain size: 30 nm, specularity: 0.2, grain reflection: 0.3,
     resistivity: {{value: 3.1(1) µΩ cm, at: 293 K, note: {q(some(each))}}}, note: {q(some(each))}}}
  - {{name: {q("x " + some())}, form: cube, edge: 5 nm, invented: true}}
cautions:
  - {{text: {q(some(each))}, hazard: [H260]}}
  - {q(some(each))}
review: {{state: reviewed, by: {q(some())}, date: 2026-11-02}}
notes: {q(some(each) + chr(10) * 2 + VECTORS[number] + chr(10) * 2 + VECTORS[-1 - number] + chr(10) + some(each))}
""",
            encoding="utf-8",
        )
    (folder / "sources.bib").write_text("\n".join(sources), encoding="utf-8")
    (folder / "handbook.yaml").write_text(
        "".join(f"{key}: {q(some(2))}\n" for key in ("title", "group", "edition", "licence"))
        + "contact: x'onclick='hit&colon;@two-metals.example\n"
        + "base address: https://two-metals.example/'onmouseover='hit()\nlanguage: en\ndate: 2026-11-02\n",
        encoding="utf-8",
    )
    return folder
