"""Folders that strangers could send: files that explode, hide, lead elsewhere or collide, and what proof says of each.

A bomb is (files, expected): `files` are the contents of a folder beside a sound imprint; an int is the size of a file
without content, a Path the target of a symbolic link. `expected` is the beginning of a fault: file, place, message.
"""

from __future__ import annotations

from pathlib import Path

RECORD = "name: X\nformula: Cu\n"
CELL = RECORD + "structure: {lattice: %s}\nelectrons: {valence: 1}\n"
CIF_RECORD = RECORD + "structure: {cif: x.cif}\n"
CIF = """\
data_x
_cell_length_a 4
_cell_length_b 4
_cell_length_c 4
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
_space_group_name_H-M_alt 'P 1'
loop_
_atom_site_label
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
"""
DOUBLING = '@string{a0 = "xxxxxxxxxx"}\n' + "".join(f"@string{{a{n} = a{n - 1} # a{n - 1}}}\n" for n in range(1, 60))
LAUGHS = 'a: &a ["ha", "ha"]\n' + "".join(
    f"{name}: &{name} [{', '.join([f'*{before}'] * 9)}]\n" for before, name in zip("abcdefgh", "bcdefghi", strict=True)
)


def record(text: str, expected: str) -> tuple[dict, str]:
    """A bomb that is one record."""
    return {"x.yaml": text}, f"x.yaml:{expected}"


def measured(text: str, expected: str) -> tuple[dict, str]:
    """A bomb that is one measured resistivity."""
    return record(f"{RECORD}measured: {{resistivity: {text}}}\n", f"3:25: {expected}")


def notes(text: str, expected: str) -> tuple[dict, str]:
    """A bomb that is the notes of a record."""
    indented = "".join(f"  {line}\n" for line in text.split("\n"))
    return record(f"{RECORD}notes: |\n{indented}", f"3:8: notes: {expected}")


def named(name: str, expected: str) -> tuple[dict, str]:
    """A bomb that is the name of a file."""
    return {name: RECORD}, expected


YAML = {
    "aliases that explode": record(LAUGHS, "1:4: the anchor '&a' is not read"),
    "an alias of itself": record("a: &a [*a]\n", "1:4: the anchor '&a' is not read"),
    "merged keys": record("<<: {name: X}\n", "1:1: '<<' merges another mapping"),
    "deep lists": record("[" * 500_000, "1:1001: not readable as YAML: exceeded maximum nesting depth"),
    "deep mappings": record("{a: " * 200_000, "1:78: nested deeper than 20 levels"),
    "deep blocks": record("".join(" " * depth + "a:\n" for depth in range(1300)), "20:20: nested deeper"),
    "deep keys": record("? " * 400_000, "1:41: nested deeper than 20 levels"),
    "a tag that runs a command": record(
        "name: !!python/object/apply:os.system ['touch ran']\n", "1:7: the tag 'tag:yaml.org,2002:python/object/apply"
    ),
    "a tag that makes an object": record("!!python/object:object {}\n", "1:1: the tag"),
    "a tag that opens a file": record("name: !include /etc/passwd\n", "1:7: the tag '!include' is not read"),
    "a tag of bytes": record("name: !!binary aGVsbG8=\n", "1:7: the tag"),
    "many documents": record("---\na: b\n" * 90_000, "3:1: a second YAML document begins here"),
    "many keys": record("".join(f"k{number}: 0\n" for number in range(70_000)), "10000:8: more than 20000 keys"),
    "many faults": record("".join(f"k{number}: &x 0\n" for number in range(60_000)), "1:5: the anchor '&x'"),
    "the same key over and over": record("a: 0\n" * 190_000, "2:1: the key 'a' stands a second time"),
    "a key of a megabyte": record("k" * 900_000 + ": 0\n", "1"),
    "a name of a megabyte": record("name: " + "n" * 900_000 + "\nformula: Cu\n", "1:7: name: found"),
    "quotes": record("name: '" + "''" * 450_000 + "\n", "1:7: not readable as YAML"),
    "percent signs": record("%" * 900_000, "1:2: not readable as YAML"),
    "tabs": record("\t" * 900_000, "1:1: a tab indents this line"),
    "a name that a spreadsheet computes": record(
        "name: '=HYPERLINK(\"x\")'\nformula: Cu\n", "1:7: name: found '=HYPERLINK(\"x\")'; expected the name of the"
    ),
    "a truth value": record("name: No\nformula: Cu\n", "1:7: the word 'No' is a truth value"),
    "a number to the base 60": measured("1:30", "'1:30' is a number to the base 60"),
    "an octal number": measured("0777", "'0777' is an octal number"),
    "NUL": record("name: a\0b\n", "1:8: the hidden character U+0000"),
    "NUL in quotes": record('name: "a\\0b"\n', "1:7: the text spells the hidden character U+0000"),
    "text that runs backwards": record("name: a\u202eb\n", "1:8: the hidden character U+202E"),
    "an isolate in a key": record("na\u2066me: a\n", "1:3: the hidden character U+2066"),
    "escapes of a terminal": record("name: \x1b[2J\n", "1:7: the hidden character U+001B"),
    "not UTF-8": ({"x.yaml": b"\xff" * 900_000}, "x.yaml:1:1: the byte 0xff is not UTF-8"),
    "UTF-16": ({"x.yaml": RECORD.encode("utf-16")}, "x.yaml:1:1: the byte 0xff is not UTF-8"),
    "surrogates": ({"x.yaml": b"name: \xed\xa0\x80\n"}, "x.yaml:1:7: the byte 0xed is not UTF-8"),
}
FILES = {
    "a record of 100 MB": ({"x.yaml": 100_000_000}, "x.yaml: larger than 1000000 bytes"),
    "a bibliography of 100 MB": ({"sources.bib": 100_000_000}, "sources.bib: larger than 4000000 bytes"),
    "a CIF of 100 MB": ({"x.yaml": CIF_RECORD, "x.cif": 100_000_000}, "x.cif: larger than 4000000 bytes"),
    "a link to an endless file": ({"x.yaml": Path("/dev/zero")}, "x.yaml: a link that leads out of the folder"),
    "a link to the passwords": ({"x.yaml": Path("/etc/passwd")}, "x.yaml: a link that leads out of the folder"),
    "a bibliography elsewhere": ({"sources.bib": Path("/etc/passwd")}, "sources.bib: a link that leads out"),
    "a link round itself": ({"x.yaml": Path("x.yaml")}, "x.yaml: a link that leads out of the folder, or nowhere"),
    "a CIF elsewhere": (
        {"x.yaml": CIF_RECORD, "x.cif": Path("/etc/passwd")}, "x.cif: a link that leads out of the folder"
    ),
    "a CIF above the folder": (
        {"x.yaml": RECORD + "structure: {cif: ../x.cif}\n"}, "x.yaml:3:18: cif: '../x.cif' is no name of a CIF"
    ),
    "a CIF of the system": (
        {"x.yaml": RECORD + "structure: {cif: /etc/passwd}\n"}, "x.yaml:3:18: cif: '/etc/passwd' is no name of a CIF"
    ),
    "a folder as a record": ({"x.yaml/y": RECORD}, "x.yaml: not a regular file"),
    "own code elsewhere": (
        {"handbook.yaml": "title: T\nown quantities: ../evil.py\n"}, "handbook.yaml:2:17: own quantities: found"
    ),
    "own code by a link": (
        {"handbook.yaml": "title: T\nown quantities: evil.py\n", "evil.py": Path("/etc/passwd")},
        "handbook.yaml:2:17: own quantities: found",
    ),
    "an earlier edition elsewhere": (
        {"handbook.yaml": "title: T\nprevious edition: ../../etc/passwd\n"},
        "handbook.yaml:2:19: previous edition: found",
    ),
}
NAMES = {
    "dots": named("..yaml", ""),
    "a parent": named("..x.yaml", ""),
    "blanks": named("a b.yaml", "a b.yaml: the file name 'a b.yaml' cannot be an address"),
    "capitals": named("Copper.yaml", "Copper.yaml: the file name 'Copper.yaml' cannot be an address"),
    "markup": named("<script>.yaml", "<script>.yaml: the file name '<script>.yaml' cannot be an address"),
    "an option": named("--help.yaml", "--help.yaml: the file name '--help.yaml' cannot be an address"),
    "a device": named("con.yaml", "con.yaml: the file name 'con.yaml' is a device on Windows"),
    "another device": named("lpt1.yaml", "lpt1.yaml: the file name 'lpt1.yaml' is a device on Windows"),
    "a line end": named("a\nb.yaml", "a\ufffdb.yaml: the file name 'a\ufffdb.yaml' cannot be an address"),
    "no text": named("\udcff.yaml", "\ufffd.yaml: the file name"),
    "escapes of a terminal in a name": named("\x1b[2J.yaml", "\ufffd[2J.yaml: the file name"),
    "a name that runs backwards": named("a\u202elmay.yaml", "a\ufffdlmay.yaml: the file name"),
    "long": named("a" * 200 + ".yaml", "a"),
    "one name on many disks": (
        {"copper.yaml": RECORD, "COPPER.yaml": RECORD}, "copper.yaml: 'copper.yaml' and 'COPPER.yaml' are one name"
    ),
    "two suffixes": ({"copper.yaml": RECORD, "copper.yml": RECORD}, "copper.yml: 'copper.yml' and 'copper.yaml'"),
}  # fmt: skip
NUMBERS = {
    "a huge exponent": measured("1e999999999 ohm m", "resistivity: '1e999999999 ohm m' is beyond what a number"),
    "a tiny exponent": measured("1e-999999999 ohm m", "resistivity: '1e-999999999 ohm m' is beyond what a number"),
    "a power of ten": measured("1×10^999999999 ohm m", "resistivity: '1×10^999999999 ohm m' is beyond"),
    "many digits": measured("9" * 900_000, "resistivity: found a text of 900000 characters"),
    "many groups of digits": measured("1" + " 000" * 49, "resistivity: "),
    "many brackets": measured("1" + "(" * 190, "resistivity: "),
    "many signs": measured("+-" * 99, "resistivity: "),
    "many dots": measured("1." * 99, "resistivity: "),
    "a wide uncertainty": measured("1(1)e308 ohm m", "resistivity: "),
    "an unbounded power of a unit": measured("1 ohm m^999999999", "resistivity: the unit 'ohm m^999999999' has the"),
    "a power of a power": measured("1 (((((m^12)^12)^12)^12)^12)^12", "resistivity: "),
    "a tower of powers": measured("1 m**9**9**9**9", "resistivity: the unit 'm**9**9**9**9' cannot be read at"),
    "nested units": measured("1 " + "(" * 29 + "m" + ")" * 29, "resistivity: '1 (((((("),
    "a unit of many letters": measured("1 " + "m" * 58, "resistivity: "),
    "a unit of a megabyte": measured("1 " + "m" * 900_000, "resistivity: found a text of 900002 characters"),
    "a unit that is code": measured("1 __import__('os').system('touch ran')", "resistivity: "),
    "an open formula": record("name: X\nformula: " + "(" * 900_000 + "\n", "2:10: a formula of 900000 characters"),
    "nested formulas": record("name: X\nformula: ((((((Cu9)9)9)9)9)9)9\n", "2:10: formula '((((((Cu9)9)9)9)9)9)9'"),
    "a multiplied formula": record("name: X\nformula: (((Cu999)999)999)999\n", "2:10: formula '(((Cu999)999)999)999'"),
    "a counted formula": record("name: X\nformula: Cu999999999\n", "2:10: formula 'Cu999999999'"),
    "a hazard without end": record(
        RECORD + "cautions: [{text: x, hazard: [" + "H300 + " * 100_000 + "x]}]\n", "3:31: hazard: found"
    ),
    "a needle of a cell": record(
        CELL % "tetragonal, a: 1 Å, c: 10000 Å", "3:12: the longest edge of the cell is 1e+04 times"
    ),
    "a sheet of a cell": record(CELL % "tetragonal, a: 10000 Å, c: 1 Å", "3:12: the longest edge of the cell"),
    "a slit of a cell": record(
        CELL % "monoclinic, a: 3 Å, b: 90 Å, c: 3 Å, beta: 1.8°", "3:12: the longest edge of the cell is 955 times"
    ),
    "a flat cell": record(CELL % "monoclinic, a: 3 Å, b: 3 Å, c: 3 Å, beta: 1°", "3:12: the angles alpha, beta"),
    "many atoms": record(
        CELL % ("sc, a: 9 nm, atoms: [" + "{element: Cu, position: [0, 0, 0]}, " * 4000 + "]"),
        "3:89985: more than 20000 keys",
    ),
    "many resistivities": measured("[" + "1 uohm cm, " * 9000 + "]", "resistivity: found a list of 9000"),
    "many specimens": record(
        RECORD + "specimens: [" + "{name: a, form: film}, " * 3000 + "]\n", "3:12: specimens: found a list of 3000"
    ),
}  # fmt: skip
LIBRARIES = {
    "a CIF of many atoms": (
        {"x.yaml": CIF_RECORD, "x.cif": CIF + "Cu 0 0 0\n" * 400_000}, "x.cif: 400000 atom sites with"
    ),
    "a CIF of many operations": (
        {
            "x.yaml": CIF_RECORD,
            "x.cif": CIF + "Cu 0 0 0\nloop_\n_space_group_symop_operation_xyz\n" + "x,y,z\n" * 600_000,
        },
        "x.cif: 600000 symmetry operations; expected at most 192",
    ),
    "a CIF of many blocks": (
        {"x.yaml": CIF_RECORD, "x.cif": "".join(f"data_{n}\n_cell_length_a 1\n" for n in range(100_000))},
        "x.cif: 100000 blocks",
    ),
    "a CIF without an end": ({"x.yaml": CIF_RECORD, "x.cif": "data_x\n_a\n;" + "x\n" * 1_900_000}, "x.cif:"),
    "a CIF of quotes": ({"x.yaml": CIF_RECORD, "x.cif": "data_x\n_a " + "'" * 3_900_000}, "x.cif:"),
    "a CIF of loops": ({"x.yaml": CIF_RECORD, "x.cif": "data_x\n" + "loop_\n" * 600_000}, "x.cif:"),
    "a CIF of one long word": ({"x.yaml": CIF_RECORD, "x.cif": "data_" + "x" * 3_900_000}, "x.cif:"),
    "a CIF of saved frames": ({"x.yaml": CIF_RECORD, "x.cif": "data_x\n" + "save_a\nsave_\n" * 200_000}, "x.cif:"),
    "a CIF with an operation of great length": (
        {"x.yaml": CIF_RECORD, "x.cif": CIF + "Cu 0 0 0\n_space_group_symop_operation_xyz '" + "x+" * 900_000 + "'\n"},
        "x.cif:",
    ),
    "abbreviations that double": ({"sources.bib": DOUBLING}, "sources.bib:12: not readable as BibTeX: a field of more"),
    "an abbreviation of itself": ({"sources.bib": "@string{a = a # a}\n@misc{k, title = a}"}, "sources.bib:1:"),
    "braces without end": ({"sources.bib": "@misc{k, title = " + "{" * 900_000}, "sources.bib:1"),
    "deep braces": (
        {"sources.bib": "@misc{k, title = " + "{" * 9000 + "}" * 9000 + "}"},
        "sources.bib:1: not readable as BibTeX: too many nested braces",
    ),
    "many signs of an entry": ({"sources.bib": "@" * 900_000}, "sources.bib:1"),
    "many broken entries": ({"sources.bib": "@misc{k,\n" * 200_000}, "sources.bib:2"),
    "many sources": ({"sources.bib": "@misc{k, note=x}\n" * 200_000}, "sources.bib:"),
    "many authors": ({"sources.bib": "@misc{k, author = {" + "A and " * 600_000 + "B}}"}, "sources.bib:1"),
    "a name of many commas": ({"sources.bib": "@misc{k, author = {" + "," * 9000 + "}}"}, "sources.bib:1:1: "),
    "many formulas in a title": ({"sources.bib": "@misc{k, title = {" + "$_{" * 6000 + "}}"}, "sources.bib:1"),
    "a page that runs": (
        {"sources.bib": "@misc{k, title = {x}, url = {javascript:alert(1)}}"},
        "sources.bib:1:1: the source 'k': the url",
    ),
    "a doi that runs": (
        {"sources.bib": "@misc{k, title = {x}, doi = {10.1000/\"><script>}}"},
        "sources.bib:1:1: the source 'k': the doi",
    ),
    "an imprint of addresses": (
        {"handbook.yaml": "title: T\ncontact: " + "a@" + "a." * 140 + "\n"}, "handbook.yaml:2:10: contact: found"
    ),
    "an imprint in many tongues": (
        {"handbook.yaml": "title: T\nlanguage: en" + "-aaaaaaaa" * 30 + "!\n"}, "handbook.yaml:2:11: language: found"
    ),
    "an edition in many folders": (
        {"handbook.yaml": "title: T\nprevious edition: " + "a/" * 140 + "a\n"}, "handbook.yaml:2:19: previous edition"
    ),
}  # fmt: skip
PICTURE = '<svg xmlns="http://www.w3.org/2000/svg">'
LOOKS = {
    "a logo of nested groups": (
        {
            "handbook.yaml": "title: T\nlook: {logo: a.svg}\n",
            "a.svg": PICTURE + "<g>" * 25_000 + "</g>" * 25_000 + "</svg>",
        },
        "a.svg:1:1: it nests groups deeper than 50 levels",
    ),
    "a logo of entities": (
        {
            "handbook.yaml": "title: T\nlook: {logo: a.svg}\n",
            "a.svg": f'<!DOCTYPE svg [<!ENTITY a "aaaa"><!ENTITY b "&a;&a;">]>{PICTURE}&b;</svg>',
        },
        "a.svg:1:1: it declares a document type",
    ),
    "a logo without an end": (
        {"handbook.yaml": "title: T\nlook: {logo: a.svg}\n", "a.svg": PICTURE + "<g>" * 60_000},
        "a.svg:1:180041: not an SVG",
    ),
    "a logo elsewhere": (
        {"handbook.yaml": "title: T\nlook: {logo: a.svg}\n", "a.svg": Path("/etc/passwd")},
        "handbook.yaml:2:14: logo: found",
    ),
    "pages elsewhere": (
        {"handbook.yaml": "title: T\npages: pages\n", "pages": Path("/etc")}, "handbook.yaml:2:8: pages: found"
    ),
    "a page elsewhere": (
        {"handbook.yaml": "title: T\npages: pages\n", "pages/a.md": Path("/etc/passwd")},
        "pages/a.md: a link that leads out of the folder",
    ),
    "a page of marks": (
        {"handbook.yaml": "title: T\npages: pages\n", "pages/a.md": "# a" + "#" * 19_900 + "x\n" + "- " * 40},
        "pages/a.md:1:1: notes: line 2 of the notes is nested",
    ),
    "templates elsewhere": (
        {"handbook.yaml": "title: T\ntemplates: ../x\n"}, "handbook.yaml:2:12: templates: found"
    ),
}  # fmt: skip
NOTES = {
    "opening brackets": notes("[" * 19_000, "19000 opening brackets; expected at most 100"),
    "pictures": notes("![" * 9000, "9000 opening brackets; expected at most 100"),
    "nested links": notes("[" * 2000 + "](x)" * 2000, "2000 opening brackets"),
    "quotations in quotations": notes(">" * 19_000, "line 1 of the notes is nested deeper than 10 levels"),
    "lists in lists": notes("- " * 9000, "line 1 of the notes is nested deeper than 10 levels"),
    "lists in quotations": notes("> 1. " * 3000, "line 1 of the notes is nested deeper than 10 levels"),
    "indented lists": notes("".join(" " * 4 * n + "- a\n" for n in range(60)), "line 11 of the notes is nested"),
    "headings": notes("# a\n" * 4500, "4500 lines; expected at most 1000"),
    "tags": notes("<b>" * 6000, "6000 signs '<'; expected at most 500"),
    "code in tables": notes("a | b\n--- | ---\n" + "`|" * 9000, "9000 backticks; expected at most 500"),
    "abbreviations": notes("".join(f"*[a{n}]: x\n" for n in range(90)), "90 abbreviations; expected at most 50"),
    "definitions": notes("a\n: b\n" * 400, "400 definitions; expected at most 50"),
    "a book": notes("word " * 9000, "found"),
}
BOMBS = {**YAML, **FILES, **NAMES, **NUMBERS, **LIBRARIES, **LOOKS, **NOTES}
# Files whose names are hidden from the handbook, so that nothing at all is wrong.
HARMLESS = {"dots", "a parent"}
