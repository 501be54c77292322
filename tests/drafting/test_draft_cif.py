"""Drafts from a CIF: the same crystal, its temperature and publication; and files that are none, or not fit."""

from __future__ import annotations

import re
from pathlib import Path

import ase
import pytest
from ase.io import read as read_with_ase
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from sheetgen.drafting import DraftRefusedError, draft_cif
from sheetgen.drafting.cif import _formula
from sheetgen.drafting.draft import _signature
from sheetgen.faults import FaultsError, MachineError
from sheetgen.handbook import Handbook
from sheetgen.records import read_folder

# An invented deposit in the form of a real one: uncertainties in brackets, charges on the symbols, codes in the texts.
OXIDE = r"""#
data_5550001
loop_
_publ_author_name
'M\"uller, Karl'
"O'Neil, Ann"
_publ_section_title
;
 Tin in indium oxide,
 In~2~O~3~
;
_journal_name_full 'Journal of Invented Crystals'
_journal_page_first 34
_journal_page_last 56
_journal_paper_doi 10.5555/invented.12
_journal_volume 12
_journal_year 2001
_cod_database_code 5550001
_chemical_formula_sum 'In1.9 O3 Sn0.1'
_chemical_name_common 'Indium tin oxide'
_symmetry_space_group_name_H-M 'I a -3'
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
_cell_length_a 10.1247(2)
_cell_length_b 10.1247(2)
_cell_length_c 10.1247(2)
_cell_measurement_temperature 295(2)
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
In1 In3+ 0.25 0.25 0.25 0.95(1)
Sn1 Sn4+ 0.25 0.25 0.25 0.05(1)
In2 In3+ 0.4661(2) 0 0.25 0.95
Sn2 Sn4+ 0.4661(2) 0 0.25 0.05
O1 O2- 0.3904(3) 0.1546(3) 0.3820(3) 1.0
"""


def cif(cell: str, symmetry: str, sites: str, more: str = "") -> str:
    """A small CIF from six cell constants, symmetry lines and one site a line (label x y z)."""
    tags = ("_cell_length_a", "_cell_length_b", "_cell_length_c",
            "_cell_angle_alpha", "_cell_angle_beta", "_cell_angle_gamma")  # fmt: skip
    constants = "\n".join(f"{tag} {value}" for tag, value in zip(tags, cell.split(), strict=True))
    loop = "loop_\n_atom_site_label\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_fract_z\n"
    return f"data_x\n{constants}\n{symmetry}\n{more}\n{loop}{sites}\n"


COPPER = cif("3.6149(3) 3.6149(3) 3.6149(3) 90 90 90", "_space_group_IT_number 225", "Cu1 0 0 0")
# Structures of textbooks, one for each way in which a cell can be tied or a group be given.
STRUCTURES = {
    "copper": COPPER,
    "rutile": cif("4.594 4.594 2.959 90 90 90", "_symmetry_space_group_name_H-M 'P 42/m n m'",
                  "Ti1 0 0 0\nO1 0.3053(2) 0.3053(2) 0"),
    "magnesium": cif("3.209 3.209 5.211 90 90 120", "_space_group_name_H-M_alt 'P 63/m m c'", "Mg1 0.3333 0.6667 0.25"),
    "antimony-hexagonal-axes": cif("4.307 4.307 11.273 90 90 120", "_symmetry_space_group_name_H-M 'R -3 m'",
                                   "Sb1 0 0 0.2335"),
    "antimony-rhombohedral-axes": cif("4.507 4.507 4.507 57.1 57.1 57.1", "_symmetry_space_group_name_H-M 'R -3 m'",
                                      "Sb1 0.2335 0.2335 0.2335"),
    "gallium": cif("4.519 7.658 4.526 90 90 90", "_space_group_name_H-M_alt 'C m c e'", "Ga1 0 0.1549 0.081"),
    "monoclinic": cif("5.15 5.21 5.31 90 99.23 90", "_symmetry_space_group_name_H-M 'P 1 21/c 1'",
                      "Zr1 0.2754 0.0395 0.2083\nO1 0.0700 0.3317 0.3447\nO2 0.4496 0.7569 0.4792"),
    "monoclinic-other-setting": cif("5.31 5.21 5.15 90 99.23 90", "_symmetry_space_group_name_H-M 'P 1 21/a 1'",
                                    "Zr1 0.2083 0.0395 0.2754\nO1 0.3447 0.3317 0.0700\nO2 0.4792 0.7569 0.4496"),
    "triclinic": cif("3 4 5 80 85 95", "_space_group_IT_number 2", "Bi1 0.1 0.2 0.3"),
    "operations-of-no-known-group": cif(
        "4 4 4 90 90 90", "loop_\n_space_group_symop_operation_xyz\n'x,y,z'\n'-x+1/8,-y+1/8,-z+1/8'",
        "Po1 0.3 0.2 0.1"),
    "operations": cif(
        "4 5 6 90 90 90", "loop_\n_symmetry_equiv_pos_as_xyz\nx,y,z\n-x,-y,z\nx,-y,-z\n-x,y,-z", "Ga1 0.1 0.2 0.3"),
    "disordered-brass": cif("2.95 2.95 2.95 90 90 90", "_space_group_IT_number 229", "", "").replace(
        "_atom_site_fract_z\n", "_atom_site_fract_z\n_atom_site_occupancy\nCu1 0 0 0 0.7\nZn1 0 0 0 0.3(1)"),
}  # fmt: skip


@pytest.fixture
def folder(tmp_path):
    path = tmp_path / "materials"
    path.mkdir()
    return path


@pytest.fixture
def given_file(tmp_path):
    """Writes a CIF outside the folder of records."""

    def write(text: str, name: str = "given.cif"):
        path = tmp_path / name
        path.write_text(text, encoding="utf-8")
        return path

    return write


def test_everything_of_a_deposit_is_kept(folder, given_file):
    drafted = draft_cif(given_file(OXIDE), folder)
    (record,) = read_folder(folder).records
    a = record.inputs["structure.a"]
    assert (record.name, record.formula, record.slug) == ("Indium tin oxide", "In1.9Sn0.1O3", "indium-tin-oxide")
    assert (a.text, a.temperature, a.sources) == ("10.1247(2) Å", 295, ("muller2001",))
    assert len(record.crystal.sites) == 32 * 2 + 48
    assert {site.occupancy for site in record.crystal.sites if site.element == "Sn"} == {0.05}
    assert (folder / "indium-tin-oxide.cif").read_text(encoding="utf-8") == OXIDE
    source = read_folder(folder).sources["muller2001"]
    assert source.authors == ("Karl Müller", "Ann O'Neil")
    assert (source.title, source.link) == ("Tin in indium oxide, In₂O₃", "https://doi.org/10.5555/invented.12")
    assert source.note == "Crystallography Open Database 5550001"
    assert drafted.source.key == "muller2001"


def test_a_draft_from_a_cif_can_be_derived(folder, given_file):
    draft_cif(given_file(COPPER), folder)
    sheet = Handbook.load(folder)["copper"]
    # Kittel, Introduction to Solid State Physics, chapter 6, table 1: 7.00 eV for n = 8.45e22 1/cm³
    assert sheet.number("fermi_energy").value == pytest.approx(7.0, abs=0.05)


# ASE reads numbers and symbols of standard settings, and neither rhombohedral axes nor bare operations.
@pytest.mark.parametrize(
    "name", ["copper", "rutile", "magnesium", "antimony-hexagonal-axes", "gallium", "triclinic", "disordered-brass"]
)
def test_the_cell_holds_the_atoms_that_another_program_finds(folder, given_file, name):
    path = given_file(STRUCTURES[name])
    draft_cif(path, folder)
    (record,) = read_folder(folder).records
    atoms = read_with_ase(path, format="cif")
    assert Handbook.load(folder).sheets[0].number("cell_volume").value == pytest.approx(atoms.get_volume(), rel=1e-6)
    positions = {tuple(round(x % 1, 2) % 1 for x in site.position) for site in record.crystal.sites}
    assert positions == {tuple(round(float(x) % 1, 2) % 1 for x in one) for one in atoms.get_scaled_positions()}


@pytest.mark.parametrize("name", STRUCTURES)
def test_the_record_reads_as_the_crystal_of_the_cif(folder, given_file, name):
    """Spelt out or by reference: what a record says of the structure is what its CIF says."""
    drafted = draft_cif(given_file(STRUCTURES[name]), folder)
    spelt = read_folder(folder).records[0].crystal
    text = drafted.record.read_text(encoding="utf-8")
    referring = re.sub(r"^structure:\n(  .*\n)+", f"structure:\n  cif: {drafted.cif.name}\n", text, flags=re.MULTILINE)
    drafted.record.write_text(referring, encoding="utf-8")
    assert _signature(spelt) == _signature(read_folder(folder).records[0].crystal)


def test_operations_of_no_known_group_leave_the_structure_to_the_cif(folder, given_file):
    drafted = draft_cif(given_file(STRUCTURES["operations-of-no-known-group"]), folder)
    assert f"structure:\n  cif: {drafted.cif.name}\n" in drafted.record.read_text(encoding="utf-8")


@pytest.mark.parametrize(
    "content, formula",
    [({"In": 30.4, "Sn": 1.6, "O": 48.0}, "In1.9Sn0.1O3"), ({"Cu": 4.0}, "Cu"), ({"Ti": 2.0, "O": 4.0}, "TiO2"),
     ({"Cu": 1.4, "Zn": 0.6}, "Cu0.7Zn0.3"), ({"Fe": 3.76, "O": 4.0}, "Fe0.94O"),
     ({"Al": 1.2, "Ga": 2.8, "As": 4.0}, "Al0.3Ga0.7As")],
)  # fmt: skip
def test_the_formula_is_the_content_of_the_cell_without_a_common_factor(content, formula):
    assert _formula(content) == formula


def test_a_cif_that_stands_beside_is_not_copied(folder):
    path = folder / "mine.cif"
    path.write_text(COPPER)
    drafted = draft_cif(path, folder)
    assert drafted.cif == path
    assert sorted(entry.name for entry in folder.iterdir()) == ["copper.yaml", "handbook.yaml", "mine.cif"]


def test_another_cif_of_the_same_name_is_left_alone(folder, given_file):
    (folder / "copper.cif").write_text("mine\n")
    with pytest.raises(DraftRefusedError) as refused:
        draft_cif(given_file(COPPER), folder)
    assert str(refused.value) == (
        f"{folder / 'copper.cif'} stands already and holds something else. Give the record another --name."
    )
    assert [path.read_text() for path in folder.iterdir()] == ["mine\n"]


def test_sources_grow_by_one_entry_and_stay_as_they_were(folder, given_file):
    old = "% ours\r\n@misc{ours, title = {Ours}}"
    (folder / "sources.bib").write_text(old, encoding="utf-8", newline="")
    draft_cif(given_file(OXIDE), folder)
    new = (folder / "sources.bib").read_bytes().decode()
    assert new.startswith(old)
    assert list(read_folder(folder).sources) == ["ours", "muller2001"]
    draft_cif(given_file(OXIDE), folder, "Twin")
    assert (folder / "sources.bib").read_bytes().decode() == new


def test_sources_survive_a_full_disk(folder, given_file, monkeypatch):
    old = "@misc{ours, title = {Ours}}\n"
    (folder / "sources.bib").write_text(old, encoding="utf-8")

    def full(descriptor):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    with pytest.raises(MachineError, match="No space left on device"):
        draft_cif(given_file(OXIDE), folder)
    assert [(path.name, path.read_text()) for path in folder.iterdir()] == [("sources.bib", old)]


def test_a_publication_in_a_block_of_its_own_is_found(folder, given_file):
    """Journals put what is common to several structures into a first block without a cell."""
    text = "data_global\n_journal_name_full 'Journal of Invented Crystals'\n_journal_year 2002\n" + COPPER
    assert draft_cif(given_file(text), folder).source.key == "copper"
    assert "Journal of Invented Crystals" in (folder / "sources.bib").read_text()


def test_a_dictionary_of_citations_gives_the_primary_one(folder, given_file):
    citation = (
        "_citation_id primary\n_citation_title 'On copper'\n_citation_year 2003\n_citation_doi 10.5555/c\n"
        "loop_\n_citation_author_citation_id\n_citation_author_name\nprimary 'Smith, J.'\nprimary 'Jones, K.'"
    )
    text = COPPER.replace("_space_group_IT_number 225", f"_space_group_IT_number 225\n{citation}")
    assert draft_cif(given_file(text), folder).source.key == "smith2003"
    assert read_folder(folder).sources["smith2003"].authors == ("J. Smith", "K. Jones")


# Entries of the Crystallography Open Database, which ASE carries for its own tests.
DEPOSITS = sorted((Path(ase.__file__).parent / "test/testdata/minerals").glob("*.cif"))


@pytest.mark.parametrize("path", DEPOSITS, ids=lambda path: path.stem)
def test_real_deposits_are_drafted_with_their_publications(folder, path):
    drafted = draft_cif(path, folder)
    read = read_folder(folder)
    atoms = read_with_ase(path, format="cif")
    source = read.sources[drafted.source.key]
    assert source.authors and source.fields["journal"] and re.fullmatch(r"(19|20)\d\d", source.year)
    assert path.stem.removeprefix("cod_") in source.note
    assert Handbook.load(folder).sheets[0].number("cell_volume").value == pytest.approx(atoms.get_volume(), rel=1e-4)


def test_there_are_real_deposits():
    assert len(DEPOSITS) >= 5


# ---------------------------------------------------------------- files that are not fit


HOSTILE = {
    "empty": ("", ":1: no data block; a CIF begins with 'data_' and a name. "
                  "Give the file that holds _cell_length_a and the rest of the structure."),
    "no cell": ("\n\ndata_x\n_cell_volume 1\n", ":3: no block with a cell. "
                "Give the file that holds _cell_length_a and the rest of the structure."),
    "several": (COPPER + COPPER.replace("data_x", "data_y"),
                f":{COPPER.count(chr(10)) + 2}: 2 blocks with a cell (x, y); expected one. Keep the block of this "
                "material in a file of its own."),
    "binary": ("PK\x03\x04", ":1:3: the hidden character U+0003 stands here; expected visible text. Delete it."),
    "half a cell": ("data_x\n_cell_length_a 3\n_space_group_IT_number 225\n",
                    ":1: '_cell_length_b' has no value; expected all lengths and angles of the cell."),
    "no symmetry": (COPPER.replace("_space_group_IT_number 225", ""),
                    ":1: no symmetry is stated; expected a space group or its operations. Add the one or the other."),
    "no atoms": (COPPER.replace("Cu1 0 0 0", "Cu1 ? ? ?"),
                 ":1: the atom site 'Cu1' has no position; expected three fractions of the cell edges."),
}  # fmt: skip


@pytest.mark.parametrize("case", HOSTILE)
def test_a_file_that_is_not_fit_gets_one_line_that_says_where(folder, given_file, case):
    text, message = HOSTILE[case]
    path = given_file(text)
    with pytest.raises(FaultsError) as caught:
        draft_cif(path, folder)
    assert [str(fault) for fault in caught.value.faults] == [f"{path}{message}"]
    assert not list(folder.iterdir())


@pytest.mark.parametrize(
    "text, line",
    [("data_x\nloop_\n_a\n_b\n1 2 3\n", 2), ("data_x\n_cell_length_a\n", 3), ("data_x\n;open\n", 2),
     ("nothing of the kind\n", 1)],
)  # fmt: skip
def test_what_is_no_cif_is_said_with_its_line(folder, given_file, text, line):
    path = given_file(text)
    with pytest.raises(FaultsError) as caught:
        draft_cif(path, folder)
    (fault,) = caught.value.faults
    assert fault.place.file == str(path)
    assert abs(fault.place.line - line) <= 1
    assert fault.message.startswith("not readable as CIF: ")


def test_a_broken_cell_is_said_with_its_line(folder, given_file):
    path = given_file(COPPER.replace("_cell_length_a 3.6149(3)", "_cell_length_a three"))
    with pytest.raises(FaultsError) as caught:
        draft_cif(path, folder)
    assert str(caught.value.faults[0]).startswith(f"{path}:2: _cell_length_a: 'three Å' does not begin with a number")


def test_faults_name_the_file_that_was_given_and_no_copy(folder, given_file):
    for text, _ in HOSTILE.values():
        with pytest.raises(FaultsError) as caught:
            draft_cif(given_file(text), folder)
        assert "structure.cif" not in str(caught.value)


def test_letters_of_another_encoding_are_said_with_their_line(folder, tmp_path):
    path = tmp_path / "latin.cif"
    path.write_bytes(COPPER.encode() + "# Müller\n".encode("latin-1"))
    with pytest.raises(FaultsError, match=r"latin\.cif:\d+:4: the byte 0xfc is not UTF-8; save the file in"):
        draft_cif(path, folder)


@pytest.mark.parametrize("name", ["a b (1).CIF", "Ümlaut.cif", "-x.cif"])
def test_a_file_of_any_name_outside_the_folder_will_do(folder, given_file, name):
    assert draft_cif(given_file(COPPER, name), folder).cif == folder / "copper.cif"
    assert len(read_folder(folder).records) == 1


@pytest.mark.parametrize("name", ["a: b", "[x] & *y", "yes", "# no comment", "{}", '"', "'", "| x", "1e5", "é%\\"])
def test_any_name_in_the_cif_becomes_a_name(folder, given_file, name):
    quote = '"' if "'" in name else "'"
    more = f"_space_group_IT_number 225\n_chemical_name_common {quote}{name}{quote}"
    drafted = draft_cif(given_file(COPPER.replace("_space_group_IT_number 225", more)), folder)
    assert read_folder(folder).records[0].name == drafted.name == name


BITS = ["data_x\n", "_cell_length_a 4\n", "loop_\n", "_atom_site_label\n", "_atom_site_fract_x\n", "Cu1 0 0 0\n",
        "_space_group_IT_number 225\n", "'", ";\n", "#", "?", "1e400", "nan", "{", "save_x\n", "\t", "é"]  # fmt: skip


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(
    bits=st.lists(st.sampled_from(BITS), max_size=12),
    cut=st.integers(0, len(OXIDE)),
    put=st.integers(0, len(OXIDE)),
)
def test_a_mangled_cif_is_drafted_or_refused_and_never_half(tmp_path_factory, bits, cut, put):
    folder = tmp_path_factory.mktemp("mangled")
    start, end = sorted((cut, put))
    path = folder / "given.cif"
    path.write_text(OXIDE[:start] + "".join(bits) + OXIDE[end if end - start < 40 else start :], encoding="utf-8")
    try:
        drafted = draft_cif(path, folder)
    except (FaultsError, DraftRefusedError):
        assert [entry.name for entry in folder.iterdir()] == ["given.cif"]
    else:
        assert [record.slug for record in read_folder(folder).records] == [drafted.record.stem]
