from __future__ import annotations

import json

import pytest

from tensorsym.crystal.formats_json import crystal_in_document
from tensorsym.crystal.read import crystal_in_text
from tensorsym.errors import StructureError
from tests.crystal.texts import AIMS, JSON, POSCAR, STRUCTURE, XSF, XYZ

METHANE = """5
methane, without a lattice
C 0 0 0
H 0.63 0.63 0.63
H -0.63 -0.63 0.63
H -0.63 0.63 -0.63
H 0.63 -0.63 -0.63
"""


def test_last_frame_is_taken_when_asked_for():
    """A trajectory gives its first frame with a note, and the last one on demand."""
    later = XYZ.replace("5.2070000000", "5.3070000000")
    first = crystal_in_text(f"{XYZ}\n{later}", "file")

    assert first.lattice[2, 2] == 5.207
    assert any("holds 2 of these: the first frame is used" in note for note in first.notes)
    assert crystal_in_text(f"{XYZ}\n{later}", "file", index=-1).lattice[2, 2] == 5.307


def test_xyz_without_lattice_is_a_molecule():
    """Methane has the class -43m (Td), and a note says that only the point group has a meaning."""
    crystal = crystal_in_text(METHANE, "file")

    assert crystal.point_group.hermann_mauguin == "-43m"
    assert any("only the point group has a meaning" in note for note in crystal.notes)


@pytest.mark.parametrize(("text", "message"), [
    (XYZ.replace("4\n", "9\n", 1), "ends after line 6, before position 5 of 9"),
    (XYZ.replace("species:S:1:pos:R:3", "colour:S:1:pos:R:3"), "name no species and positions"),
    (XYZ.replace('Lattice="3.25', 'Lattice="wide 3.25'), "line 2: Lattice: 'wide' is no number"),
    (XYZ.replace('0.0000000000 0.0000000000 5.2070000000"', '"'), "Lattice: 6 numbers"),
    (XYZ.replace("1 Zn", "1 Zn x"), "line 4: position 2 of 4: 'x' is no number"),
    (METHANE.replace("H 0.63 0.63 0.63", "H 0.63 nan 0.63"), "line 4: position 2 of 5: 'nan' is not finite"),
])  # fmt: skip
def test_broken_xyz_is_told(text, message):
    """A damaged frame is refused with its line."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "file")


@pytest.mark.parametrize(("text", "message"), [
    (XSF.replace("PRIMVEC", "CONVVEC"), "holds no PRIMVEC"),
    (XSF.replace("4 1\n", "many 1\n"), "line 8: number of atoms: 'many' is no whole number"),
    (XSF.replace("4 1\n", "7 1\n"), "before position 5 of 7"),
    (XSF.replace("30 ", "999 "), "line 9: 999 is no atomic number; expected 1 to 118"),
])  # fmt: skip
def test_broken_xsf_is_told(text, message):
    """A damaged XSF is refused with its line."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "file")


@pytest.mark.parametrize("document", [
    pytest.param(STRUCTURE, id="structure"), pytest.param([STRUCTURE], id="list"),
    pytest.param({"structure": STRUCTURE, "other": {"lattice": 1}}, id="key"),
    pytest.param({"input": {"crystal": {"structure": STRUCTURE}}}, id="nested"),
    pytest.param({"poscar": POSCAR}, id="poscar"),
    pytest.param({"output": {}, "final_structure": STRUCTURE}, id="final"),
])  # fmt: skip
def test_structure_is_found_in_a_document(document):
    """A structure is found as the document itself, under its key, or deeper, and a POSCAR as text too."""
    assert crystal_in_document(document, "file").symmetry.number == 186


def test_document_a_line_gives_the_one_asked_for():
    """A file with one document a line is read, the first by default, with a note."""
    other = json.dumps({"poscar": "a\n1.0\n4 0 0\n0 4 0\n0 0 4\nPo\n1\nDirect\n0 0 0\n"})
    first = crystal_in_text(f"{JSON}\n{other}\n", "file")

    assert first.symmetry.number == 186
    assert any("2 of these: the first document" in note for note in first.notes)
    assert crystal_in_text(f"{JSON}\n{other}\n", "file", index=1).symmetry.number == 221


def test_mixed_site_and_charges_of_a_document():
    """Occupancies make one label, oxidation states are left out."""
    document = {
        "lattice": {"matrix": [[4, 0, 0], [0, 4, 0], [0, 0, 4]]},
        "sites": [
            {"species": [{"element": "Na+", "occu": 0.5}, {"element": "K", "occu": 0.5}], "abc": [0, 0, 0]},
            {"species": [{"element": "Cl", "oxidation_state": -1, "occu": 1}], "abc": [0.5, 0.5, 0.5]},
        ],
    }

    assert crystal_in_document(document, "file").species == ("K0.5Na0.5", "Cl")


@pytest.mark.parametrize(("text", "message"), [
    (JSON[:-40], "is no JSON document.*cut off"),
    ("{}", "holds no structure; expected a pymatgen structure"),
    (JSON + " more", "line 1: is no JSON document: Extra data"),
    (json.dumps({"structure": {**STRUCTURE, "lattice": {}}}), "the structure is damaged at 'matrix'"),
    (json.dumps({"structure": {**STRUCTURE, "sites": [{"abc": [0, 0, 0]}]}}), "the structure is damaged at 'species'"),
    (json.dumps({"structure": {**STRUCTURE, "sites": [1]}}), "the structure is damaged"),
    (json.dumps({"structure": {**STRUCTURE, "sites": []}}), "holds no atoms"),
    (JSON.replace("5.207", "NaN"), r"the lattice hold.* not finite"),
    ("[" * 100_000, "is no JSON document|nested too deeply"),
    (json.dumps({"a": {"a": {"a": {"a": {"a": {"a": {"a": {"a": STRUCTURE}}}}}}}}), "holds no structure"),
])  # fmt: skip
def test_broken_json_is_told(text, message):
    """A document that is cut, damaged, too deep or without a structure is refused in one line."""
    with pytest.raises(StructureError, match=message):
        crystal_in_text(text, "file.json")


@pytest.mark.filterwarnings("ignore")  # pymatgen's own
def test_pymatgen_s_own_document_is_read():
    """What pymatgen writes today is read without it."""
    from pymatgen.core import Lattice, Structure

    structure = Structure(Lattice.cubic(4.0), [{"Na+": 0.5, "K+": 0.5}, "Cl-"], [[0, 0, 0], [0.5, 0.5, 0.5]])

    assert crystal_in_text(structure.to_json(), "file").species == ("K0.5Na0.5", "Cl")


@pytest.mark.filterwarnings("ignore")  # ASE's own
def test_broken_text_of_ase_is_told():
    """A text with the marks of a format that ASE reads, but damaged, is refused with ASE's reason."""
    with pytest.raises(StructureError, match="cannot be read as 'aims'"):
        crystal_in_text(AIMS.replace("lattice_vector", "lattice_vector 1.0 2.0 3.0 4.0 x", 1) + "atom 1 2 3\n", "file")
