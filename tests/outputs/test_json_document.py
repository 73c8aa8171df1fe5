from __future__ import annotations

import json

import numpy as np
import pytest

from tensorsym.errors import InputError
from tensorsym.outputs.read import read_documents, read_output, read_tensors
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
ROWS, ELASTIC = DATA / "piezoelectric-rows.jsonl", DATA / "elastic-row.json"
STRUCTURE = {
    "@class": "Structure",
    "lattice": {"matrix": [[0.0, 2.73, 2.73], [2.73, 0.0, 2.73], [2.73, 2.73, 0.0]]},
    "sites": [
        {"species": [{"element": "Si", "occu": 1}], "abc": [0.0, 0.0, 0.0]},
        {"species": [{"element": "Si", "occu": 1}], "abc": [0.25, 0.25, 0.25]},
    ],
}


def written(folder, document):
    """Write a document where a reader can find it."""
    path = folder / "document.json"
    path.write_text(json.dumps(document), encoding="utf-8")
    return path


def test_published_rows():
    """Each line gives its structure and its tensor; the unit C/m^2 says that it is e."""
    outputs = list(read_documents(ROWS))

    assert len(outputs) == 3
    assert {record.property for output in outputs for record in output.tensors} == {"piezoelectric-stress"}
    assert outputs[0].crystal.symmetry.number == 216
    assert outputs[0].tensors[0].values[0, 1, 2] == -0.15842
    assert outputs[0].tensors[0].digits == pytest.approx(1e-5)


def test_first_row_stands_for_the_file():
    """Read as one output, a file of lines gives its first line."""
    assert read_output(ROWS).crystal.formula == "AgI"


def test_residual_of_a_published_row():
    """The first elastic row has the residual 5.236e-4 that stands in the row itself; the turned tensor is left out."""
    output = read_output(ELASTIC)
    (record,) = output.tensors

    assert residual(output.crystal, record) == pytest.approx(5.236e-4, rel=1e-3)
    assert any("elastic-stiffness-turned is left out" in note for note in output.notes)


@pytest.mark.parametrize(
    ("document", "expected"),
    [
        ({"elasticity": {"elastic_tensor": np.eye(6).tolist()}}, [("elastic-stiffness", "GPa", "")]),
        ({"compliance_tensor": np.eye(6).tolist()}, [("elastic-compliance", "TPa^-1", "")]),
        (
            {"dielectric": {"total": np.eye(3).tolist(), "ionic": np.eye(3).tolist()}},
            [("dielectric", "1", "total"), ("dielectric", "1", "ionic")],
        ),
        ({"piezo": {"electronic": np.ones((3, 6)).tolist()}}, [("piezoelectric-stress", "C/m^2", "electronic")]),
        ({"born_charges": np.ones((2, 3, 3)).tolist()}, [("born-charge", "e", "")]),
        ({"piezo_tensor": np.ones((3, 3, 3)).tolist()}, [("piezoelectric-stress", "C/m^2", "")]),
    ],
)
def test_names_of_databases(tmp_path, document, expected):
    """Tensors are found under the names that databases use, with a structure anywhere in the document."""
    output = read_output(written(tmp_path, {"structure": STRUCTURE, "data": document}))

    assert [(r.property, r.unit, r.contribution) for r in output.tensors] == expected
    assert all(record.complete == (record.contribution != "ionic") for record in output.tensors)
    assert output.crystal.symmetry.number == 227


def test_document_without_structure(tmp_path):
    """Tensors without a structure are read for the structure file that goes with them."""
    path = written(tmp_path, {"elasticity": {"elastic_tensor": np.eye(6).tolist()}})

    assert read_output(path).crystal is None
    assert read_tensors(path)[0].property == "elastic-stiffness"


@pytest.mark.parametrize(
    ("document", "says"),
    [
        ({"data": 5}, "holds no tensor and no structure"),
        ({"elastic_tensor": [[1, 2], [3, 4]]}, r"elastic_tensor: values of shape \(2, 2\) do not fit"),
        ({"elastic_tensor": [[float("nan")] * 6] * 6}, r"elastic_tensor: values at \(1, 1\): NaN is not finite"),
        ({"elastic_tensor": [[1] * 6] * 5 + [[1] * 5]}, "rows have different lengths"),
        ({"piezoelectric": {"values": np.ones((3, 6)).tolist(), "order": "1 2 3"}}, "no order of the six index pairs"),
        ({"structure": {"lattice": 5, "sites": []}, "dielectric": np.eye(3).tolist()}, "structure"),
    ],
)
def test_fault_is_named(tmp_path, document, says):
    """A document of nothing known, wrong shapes and damaged structures are refused with the key."""
    with pytest.raises(InputError, match=says):
        read_output(written(tmp_path, document))


def test_broken_line_is_named(tmp_path):
    """In a file of lines the number of the broken one is told."""
    path = tmp_path / "rows.jsonl"
    first = ROWS.read_text(encoding="utf-8").splitlines()[0]
    path.write_text(f"{first}\n{first[:200]}\n", encoding="utf-8")
    outputs = read_documents(path)
    next(outputs)

    with pytest.raises(InputError, match="line 2"):
        next(outputs)
