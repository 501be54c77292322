"""Handbooks of one or a few records, written for a test and derived."""

from __future__ import annotations

from pathlib import Path

from sheetgen.handbook import Handbook

IMPRINT = """\
title: A test
group: A test group
edition: "1"
licence: CC-BY-4.0
"""
SOURCES = "@misc{here, title = {A number chosen for a test}, author = {Nobody}, year = {2026}}\n"
COPPER = """\
name: Copper
formula: Cu
structure:
  lattice: fcc
  a: {value: 3.6149(3) Å, at: 293 K, from: here}
electrons:
  valence: 1
measured:
  resistivity:
    - {value: 0.21(1) µΩ cm, at: 77 K, from: here}
    - {value: 1.678(9) µΩ cm, at: 293.15 K, from: here}
  debye temperature: {value: 343(5) K, from: here}
  heat coefficient: {value: 0.695(10) mJ/(mol K²), from: here}
  work function: {value: 4.65(10) eV, from: here}
"""
WELL = """\
name: Quantum well
formula: GaAs
electrons:
  dimension: 2
  density: {value: 3.0(1)e11 1/cm², from: here}
  effective mass: {value: 0.067, from: here}
  background permittivity: {value: 12.9, from: here}
measured:
  sheet resistance:
    - {value: 20(1) Ω, at: 4.2 K, from: here}
"""


def handbook_of(folder: Path, imprint: str = IMPRINT, **records: str) -> Handbook:
    """Write records (file stem → text) with an imprint and a source into a folder, and derive them."""
    folder.mkdir(parents=True, exist_ok=True)
    (folder / "handbook.yaml").write_text(imprint, encoding="utf-8")
    (folder / "sources.bib").write_text(SOURCES, encoding="utf-8")
    for stem, text in records.items():
        (folder / f"{stem.replace('_', '-')}.yaml").write_text(text, encoding="utf-8")
    return Handbook.load(folder)
