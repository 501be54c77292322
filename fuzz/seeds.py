"""What the fuzzers begin with: real records, and words that mean something to one of the parsers."""

from __future__ import annotations

import re
from pathlib import Path

MATERIALS = Path(__file__).parent.parent / "materials"
RECORDS = ("copper", "titanium-nitride", "bismuth", "indium-tin-oxide", "gallium-arsenide-quantum-well", "sodium")

CIF = """\
data_x
_cell_length_a 4.593659(18)
_cell_length_b 4.593659(18)
_cell_length_c 2.958682(8)
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
_space_group_name_H-M_alt 'P 42/m n m'
loop_
_space_group_symop_operation_xyz
x,y,z
-x,-y,z
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
Ti1 Ti4+ 0 0 0 1
O1 O2- 0.30479(10) 0.30479(10) 0 1.0
"""

VALUES = (
    "3.6149(2) Å", "1.676(5) µΩ cm", "293 K", "20 °C", "1.03(2)e19 cm^-3", "1.03(2)×10^19 1/cm^3",
    "0.695(10) mJ/(mol K²)", "3.6149 ± 0.0002 Å", "(1.2 ± 0.1)e-8 Ω m", "-5.1e-11 m³/C", "90°",
    "1,5 nm", "1e999 m", "4.2 eV", "40(2) nm",
)  # fmt: skip
UNITS = (
    "µΩ cm", "mJ/(mol K^2)", "1/(eV nm^3)", "Ω/sq", "m_e", "angstrom^3", "rad/(s T)", "W/(m·K)", "cm²/(V s)",
    "°C", "%", "µΩ-cm", "kcal/mol", "per second", "m^(-2)", "((m))", "dB", "lb*ft", "atomic_unit_of_time",
)  # fmt: skip
FORMULAS = ("Cu", "GaAs", "Ga0.7Al0.3As", "Mg(OH)2", "In2O3", "(Cu)9999", "((((((Cu))))))2", "H₂O", "cU", "Cu0")
NOTES = (
    "# One\n\n*two* **three** `four`\n\n| a | b |\n|---|---|\n| 1 | 2 |\n",
    "[link](https://example.org/ \"title\") <https://example.org> [x](javascript:alert(1)) ![p](x.png)\n\n> quote\n",
    "1. a\n   - b\n     1. c\n\nTerm\n:   definition\n\n*[HTML]: abbreviation\n\n<script>alert(1)</script>\n",
    "```\ncode\n```\n\n&lt;svg&gt; &#106;avascript: <a href=\"data:text/html,x\" onclick=x>y</a> <!-- c --> <b>t</b>\n",
)  # fmt: skip
WORDS = (
    "No", "on", "1:30", "0123", "1e-8", "e999", "(", ")", "[", "]", "{", "}", ": ", "- ", ", ", " #", "&a", "*a", "!!x",
    "|", ">", "'", '"', "%", "@", "---", "...", "<<", "? ", "nan", ".inf", "~", "true", "null", "×10^", "±", "µΩ cm",
    "Å", "°", "²", "⁻¹", "/sq", "**", "^9", "name: ", "formula: ", "structure:", "lattice: ", "space group: ", "atoms:",
    "a: ", "c/a: ", "electrons:", "valence: ", "density: ", "dimension: 2", "measured:", "resistivity: ", "at: ",
    "from: ", "specimens:", "thickness: ", "cautions:", "hazard: ", "review:", "notes: ", "cif: ", "@article{",
    "@string{",
    "@comment{", "author = ", "doi = ", "url = ", "\\emph{", "$_2$", "loop_", "data_", "_cell_length_a",
    "_atom_site_label", "save_", ";\n", "temperatures: ", "thresholds:", "units:", "own quantities: ", "```",
    "javascript:", "<script>",
    "onerror=", "<svg/onload=", "](", "![", "&#x6a;", "| --- |", "fcc", "hcp", "rhombohedral", "K", "eV", "nm", "e19",
)  # fmt: skip


_CITATION = re.compile(rb",? *from: (?:\[[^\]]*\]|[\w.-]+)")


def seeds() -> dict[str, list[bytes]]:
    """Inputs to begin with, by the name of the target."""
    records = [(MATERIALS / f"{slug}.yaml").read_bytes() for slug in RECORDS]
    bibliography = (MATERIALS / "sources.bib").read_bytes()
    return {
        "value": [bytes([index]) + text.encode() for index, text in enumerate(VALUES)],
        "unit": [text.encode() for text in UNITS],
        "formula": [text.encode() for text in FORMULAS],
        "record": records,
        "sheet": [_CITATION.sub(b"", text) for text in records]
        + [
            b"name: Copper\nformula: Cu\nstructure: {lattice: fcc, a: 3.6 \xc3\x85}\nelectrons: {valence: 1}\n"
            b"measured: {resistivity: {value: 1.7(1) uohm cm, at: 293 K}, debye temperature: 343 K}\n"
        ],
        "imprint": [(MATERIALS / "handbook.yaml").read_bytes()],
        "bibliography": [bibliography[start : start + 900] for start in range(0, 5400, 900)],
        "cif": [CIF.encode()],
        "markdown": [text.encode() for text in NOTES],
    }
