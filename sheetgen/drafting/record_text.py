"""The text of a drafted record, from what is known of the material."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from sheetgen.drafting.blanks import (
    density_blanks,
    mass_blanks,
    measured_blanks,
    specimen_blanks,
    structure_blanks,
)
from sheetgen.drafting.compounds import Valences, common_lattice, valences
from sheetgen.drafting.hazards import LAST, Hazard, hazards
from sheetgen.drafting.writing import blank, commented, folded, joined, scalar
from sheetgen.records import atomic_weight


@dataclass(frozen=True)
class Material:
    """What a record starts from; `structure` holds its lines where the structure is known (from a CIF)."""

    name: str
    formula: str
    composition: dict[str, float]
    structure: tuple[str, ...] = ()
    origin: str = ""

    @property
    def valences(self) -> Valences:
        """The usual count of its electrons."""
        return valences(self.composition)


def record_text(material: Material) -> str:
    """The YAML text of a draft: what is known, then blanks with what is expected in them."""
    return joined(
        [
            _head(material),
            _identity(material),
            list(material.structure) or structure_blanks(common_lattice(material.composition)),
            _electrons(material.valences),
            measured_blanks(),
            specimen_blanks(),
            _cautions(hazards(material.composition)),
            [
                "review: {state: draft}",
                blank("review: {state: reviewed, by: ?, date: ?}", "initials and day, such as 2026-11-02"),
            ],
            [blank("notes: |", "what a reader should know, in Markdown")],
        ]
    )


def _head(material: Material) -> list[str]:
    lines = commented(f"{material.name}: a draft. {material.origin}".strip())
    lines += commented(
        "A commented line with a question mark is a blank: take the # and the question marks away and write what you "
        "know, or delete the line. 'from' names a key of sources.bib. What says recalled: true was not looked up: "
        "check it, cite it, take the flag away. Then: sheetgen proof"
    )
    return lines


def _identity(material: Material) -> list[str]:
    weights = [(element, atomic_weight(element)) for element in material.composition]
    known = ", ".join(f"{element} {weight:g}" for element, weight in weights if weight is not None)
    unknown = ", ".join(element for element, weight in weights if weight is None)
    lines = [f"name: {scalar(material.name)}", f"formula: {scalar(material.formula)}"]
    if known:
        lines += commented(f"Standard atomic weights in g/mol, as CIAAW abridges them: {known}.")
    if unknown:
        lines += commented(f"No standard atomic weight exists for {unknown}: the sheet will state no mass density.")
    return lines


def _electrons(found: Valences) -> list[str]:
    if not found.electrons:
        return [*commented(f"Electrons: {found.reason}."), *density_blanks()]
    lines = ["electrons:"]
    if len(found.electrons) == 1:
        (count,) = found.electrons.values()
        lines.append(f"  valence: {{value: {count}, recalled: true}}")
    else:
        lines.append("  valence:")
        lines += [f"    {scalar(e)}: {{value: {count}, recalled: true}}" for e, count in found.electrons.items()]
    reason = f"Assumption: {found.reason}."
    return [*lines, "  note: >-", *folded(reason, 4), *mass_blanks()]


def _cautions(known: Sequence[Hazard]) -> list[str]:
    lines = commented("GHS codes recalled, not looked up: hold them against the supplier's safety data sheet.")
    lines.append("cautions:")
    for hazard in [*known, Hazard(LAST)]:
        lines += ["  - text: >-", *folded(hazard.text, 6)]
        if hazard.codes:
            lines.append(f"    hazard: [{', '.join(hazard.codes)}]")
    return lines
