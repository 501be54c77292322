"""A handbook as small as one can be."""

from __future__ import annotations

from pathlib import Path

FILES = {
    "handbook.yaml": """\
title: Two Metals
group: A group of two
edition: "1"
licence: CC-BY-4.0
language: en
contact: desk@two-metals.example
base address: https://two-metals.example/
""",
    "sources.bib": """\
@book{tables,
  title = {Tables for two metals},
  author = {A. Compiler},
  publisher = {Example Press},
  year = {2001},
}
""",
    "copper.yaml": """\
name: Copper
formula: Cu
structure:
  lattice: fcc
  a: {value: 3.6149(3) Å, at: 293 K, from: tables}
electrons:
  valence: 1
measured:
  resistivity: {value: 1.678(9) µΩ cm, at: 293 K, from: tables}
  debye temperature: {value: 343 K, from: tables}
  heat coefficient: {value: 0.695 mJ/(mol K²), from: tables}
""",
    "sodium.yaml": """\
name: Sodium
formula: Na
structure:
  lattice: bcc
  a: {value: 4.2906(5) Å, at: 293 K, from: tables}
electrons:
  valence: 1
cautions:
  - {text: Sodium reacts violently with water., hazard: [H260, H314]}
""",
}


def write_small_handbook(folder: Path) -> Path:
    """Write the four files into a new folder and return it."""
    folder.mkdir(parents=True)
    for name, text in FILES.items():
        (folder / name).write_text(text, encoding="utf-8")
    return folder
