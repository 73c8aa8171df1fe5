from __future__ import annotations

import json
import stat

import numpy as np
import pytest

from tensorsym.errors import InputError, ShapeError, TensorFileError
from tensorsym.outputs.read import read_output, read_tensors
from tensorsym.outputs.record import TensorRecord
from tensorsym.outputs.tensor_file import tensor_document, write_document

E_QUARTZ = [[0.171, -0.171, 0, -0.0406, 0, 0], [0, 0, 0, 0, 0.0406, -0.171], [0, 0, 0, 0, 0, 0]]
DOCUMENT = {
    "schema": "tensorsym/tensor/1",
    "property": "piezoelectric",
    "unit": "C/m^2",
    "axes": "file",
    "notation": "voigt",
    "order": "11 22 33 23 13 12",
    "values": E_QUARTZ,
}


def written(folder, document):
    """Write a document, or a text as it is."""
    path = folder / "tensor.json"
    path.write_text(document if isinstance(document, str) else json.dumps(document), encoding="utf-8")
    return path


def one_of(folder, document):
    """Return the only record of a document."""
    (record,) = read_tensors(written(folder, document))
    return record


def test_contract_document(tmp_path):
    """The document of the contract is read; its unit says that it is e, whose shear columns carry no factor."""
    record = one_of(tmp_path, DOCUMENT)

    assert (record.property, record.unit) == ("piezoelectric-stress", "C/m^2")
    assert record.values[1, 0, 1] == record.values[1, 1, 0] == -0.171
    assert record.values[0, 1, 2] == -0.0406
    assert record.axes is None
    assert record.order == "11 22 33 23 13 12"


def test_strain_form_has_the_factor_of_two(tmp_path):
    """With its own unit the same name is d, whose shear columns are twice the component (Nye, ch. VII)."""
    record = one_of(tmp_path, DOCUMENT | {"unit": "pC/N"})

    assert record.property == "piezoelectric"
    assert record.values[0, 1, 2] == -0.0203


def test_factors_of_the_document_count(tmp_path):
    """Factors in the document stand in place of those of the catalogue."""
    record = one_of(tmp_path, DOCUMENT | {"unit": "pC/N", "factors": [1]})

    assert record.values[0, 1, 2] == -0.0406


def test_order_is_followed(tmp_path):
    """With another order the columns go to other components."""
    record = one_of(tmp_path, DOCUMENT | {"order": "xx yy zz xy yz zx"})

    assert record.values[0, 0, 1] == -0.0406
    assert record.values[1, 1, 2] == 0.0406
    assert record.values[1, 2, 0] == -0.171


def test_full_notation_is_the_default(tmp_path):
    """Without notation the values are the full tensor."""
    values = np.arange(9.0).reshape(3, 3)
    record = one_of(tmp_path, {"schema": DOCUMENT["schema"], "property": "dielectric", "values": values.tolist()})

    assert (record.values == values).all()
    assert (record.unit, record.order) == ("1", "")


def test_axes_are_a_matrix_of_rows(tmp_path):
    """Axes may be a rotation matrix; it is kept, read-only."""
    turn = [[0, 1, 0], [0, 0, 1], [1, 0, 0]]
    record = one_of(tmp_path, DOCUMENT | {"axes": turn})

    assert record.axes.tolist() == turn
    assert not record.axes.flags.writeable


@pytest.mark.parametrize(("sigma", "expected"), [(0.01, 0.01), (None, None)])
def test_sigma_as_one_number(tmp_path, sigma, expected):
    """One sigma holds for every component; null is no sigma."""
    assert one_of(tmp_path, DOCUMENT | {"sigma": sigma}).sigma == expected


def test_sigma_as_an_array_follows_the_factors(tmp_path):
    """Sigma in matrix notation becomes that of the tensor's components: halved on the shear of d."""
    sigma = np.full((3, 6), 0.02).tolist()
    record = one_of(tmp_path, DOCUMENT | {"unit": "pC/N", "sigma": sigma})

    assert record.sigma.shape == (3, 3, 3)
    assert (record.sigma[0, 0, 0], record.sigma[0, 1, 2]) == (0.02, 0.01)


def test_one_tensor_an_atom(tmp_path):
    """A property of sites may have one tensor for each of several named sites."""
    charges = np.arange(18.0).reshape(2, 3, 3)
    document = {
        "schema": DOCUMENT["schema"], "property": "born-charge", "values": charges.tolist(), "sites": ["Ga", "As"],
    }  # fmt: skip
    record = one_of(tmp_path, document)

    assert record.per_site
    assert record.site_labels == ("Ga", "As")
    assert (record.values == charges).all()


@pytest.mark.parametrize("wrap", [lambda parts: parts, lambda parts: {"tensors": parts}])
def test_several_documents(tmp_path, wrap):
    """A list of documents, or an object that holds one, gives a record each, in order."""
    other = {"schema": DOCUMENT["schema"], "property": "dielectric", "values": np.eye(3).tolist()}
    records = read_tensors(written(tmp_path, wrap([DOCUMENT, other])))

    assert [record.property for record in records] == ["piezoelectric-stress", "dielectric"]


@pytest.mark.parametrize(
    ("values", "digits"),
    [
        ("[[9.43, 0, 0], [0, 9.43, 0], [0, 0, 10.5]]", 1e-2),
        ("[[9.43, 0.00, 0], [0, 9.430, 0], [0, 0, 10.512]]", 1e-3),
        ("[[9.430, 0.0, 0], [0, 9.430, 0], [0, 0, 10.500]]", 1e-3),
        ("[[9.43e1, 0, 0], [0, 9.43e1, 0], [0, 0, 1.05e2]]", 1e0),
        ("[[9, 0, 0], [0, 9, 0], [0, 0, 10]]", None),
    ],
)
def test_digits_are_those_printed(tmp_path, values, digits):
    """The last place comes from the text of the numbers, trailing zeros included; whole numbers tell nothing."""
    text = f'{{"schema": "tensorsym/tensor/1", "property": "dielectric", "values": {values}}}'

    assert one_of(tmp_path, text).digits == (pytest.approx(digits) if digits else None)


ROWS = [[1, 0, 0], [0, 1, 0], [0, 0, 1]]
FAULTS = [
    ({"schema": None}, TensorFileError, "schema None; expected tensorsym/tensor/1"),
    ({"schema": "tensorsym/tensor/2"}, TensorFileError, "schema 'tensorsym/tensor/2'"),
    ({"proprety": 1}, TensorFileError, "'proprety' is no key.*nearest: property"),
    ({"property": "piezolectric"}, TensorFileError, "no property.*nearest: piezoelectric"),
    ({"property": 5}, TensorFileError, "property is 5; expected text"),
    ({"unit": ["C"]}, TensorFileError, "unit is"),
    ({"notation": "mandel"}, TensorFileError, "notation 'mandel'; expected voigt or full"),
    ({"order": "11 22 33 23 13"}, TensorFileError, "no order of the six index pairs"),
    ({"order": "11 22 33 23 13 13"}, TensorFileError, "no order of the six index pairs"),
    ({"axes": "ieee"}, TensorFileError, "axes 'ieee'; expected 'file' or a 3x3 matrix"),
    ({"axes": [[1, 0, 0], [0, 1, 0], [0, 0, -1]]}, TensorFileError, "left-handed"),
    ({"axes": [[1, 0, 0], [0, 2, 0], [0, 0, 1]]}, TensorFileError, "not perpendicular unit vectors"),
    ({"axes": [[1, 0], [0, 1]]}, TensorFileError, "shape"),
    ({"factors": [1, 2]}, TensorFileError, "a list of 1 numbers"),
    ({"factors": [-1]}, TensorFileError, "not positive"),
    ({"factors": 2}, TensorFileError, "factors 2 do not fit"),
    ({"sigma": -1}, TensorFileError, "sigma holds a negative number"),
    ({"sigma": "big"}, TensorFileError, "sigma: 'big' is no number"),
    ({"sigma": ROWS}, TensorFileError, r"sigma of shape \(3, 3\) do not fit"),
    ({"sites": ["a", "b"]}, TensorFileError, "a list of 1 names"),
    ({"values": []}, TensorFileError, r"values of shape \(0,\)"),
    ({"values": ROWS}, TensorFileError, r"values of shape \(3, 3\) do not fit piezoelectric-stress in voigt.*\(3, 6\)"),
    ({"values": 1.5}, TensorFileError, r"values of shape \(\)"),
    ({"values": [[1, 2], [3]]}, TensorFileError, "values: the rows have different lengths"),
    ({"values": [[1, [2]], [3, 4]]}, TensorFileError, r"values at \(1\): the rows have different lengths"),
    ({"values": [[0] * 6, [0, 0, 0, None, 0, 0], [0] * 6]}, TensorFileError, r"at \(2, 4\): 'None' is no number"),
    ({"values": [[0] * 6, [0, 0, 0, True, 0, 0], [0] * 6]}, TensorFileError, r"values at \(2, 4\)"),
    ({"values": [[0] * 6, [0] * 6, [0, float("nan"), 0, 0, 0, 0]]}, TensorFileError, r"\(3, 2\): NaN is not finite"),
    ({"values": [[0] * 6, [0] * 6, [0, float("-inf"), 0, 0, 0, 0]]}, TensorFileError, r"-Infinity is too large"),
    ({"values": [[10**400] + [0] * 5, [0] * 6, [0] * 6]}, TensorFileError, r"values at \(1, 1\).*too large"),
]  # fmt: skip


@pytest.mark.parametrize(("change", "kind", "says"), FAULTS)
def test_fault_is_named(tmp_path, change, kind, says):
    """Whatever is wrong in a document is refused with the key, or the row and column, named."""
    with pytest.raises(kind, match=says) as caught:
        read_tensors(written(tmp_path, DOCUMENT | change))

    assert caught.value.exit_code == 3
    assert "tensor.json" in str(caught.value)


@pytest.mark.parametrize("key", ["schema", "property", "values"])
def test_missing_key_is_named(tmp_path, key):
    """A key that must be there is named when it is not."""
    document = {name: value for name, value in DOCUMENT.items() if name != key}

    with pytest.raises(TensorFileError, match=f"'{key}' is missing"):
        read_tensors(written(tmp_path, [document]))


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("{", "no JSON document.*line 1, column 2|line 1, column 2.*no JSON document"),
        ('{"schema": "tensorsym/tensor/1", "values": [[1,\n0', "line 2"),
        ('{"schema": "tensorsym/tensor/1", "property": "efg", "property": "dielectric"}', "'property' is there twice"),
        ("[]", "holds no tensor"),
        ('{"tensors": []}', "holds no tensor"),
        ('{"schema": "tensorsym/tensor/1", "tensors": 5}', "holds no tensor"),
        ("[{}, 5]", "tensor 1.*'schema' is missing"),
        ('["a"]', "a tensor is an object"),
        ("[" * 100_000, "no JSON document"),
        ('{"schema": "tensorsym/tensor/1", "property": "dielectric", "values": ' + "[" * 5000, "no JSON document"),
    ],
)
def test_broken_json_is_told(tmp_path, text, says):
    """Text that is no sound document is refused, with line and column where JSON breaks."""
    with pytest.raises(InputError, match=says):
        read_tensors(written(tmp_path, text))


def test_number_of_the_wrong_tensor_is_told(tmp_path):
    """In a list the number of the faulty tensor is told."""
    with pytest.raises(TensorFileError, match="tensor 2"):
        read_tensors(written(tmp_path, [DOCUMENT, DOCUMENT | {"values": ROWS}]))


def test_written_document_is_read_back(tmp_path):
    """What is written is read back as it was, axes, label and sites included."""
    turn = np.array([[0.0, 1, 0], [0, 0, 1], [1, 0, 0]])
    values = np.random.default_rng(5).normal(size=(2, 3, 3))
    record = TensorRecord(
        "born-charge", "as printed", values, "e", axes=turn, per_site=True, site_labels=("1 Si", "2 C")
    )  # fmt: skip
    path = tmp_path / "out.json"
    write_document(tensor_document(record, {"steps": ["none"]}), path)
    (back,) = read_tensors(path)

    assert (back.values == values).all()
    assert (back.axes == turn).all()
    assert (back.label, back.unit, back.site_labels, back.per_site) == ("as printed", "e", ("1 Si", "2 C"), True)
    assert read_output(path).crystal is None


def test_existing_file_is_kept(tmp_path):
    """A file that exists is replaced with force only, and nothing else is left in the folder."""
    path = tmp_path / "out.json"
    path.write_text("mine", encoding="utf-8")

    with pytest.raises(TensorFileError, match=r"exists already.*--force"):
        write_document({"a": 1}, path)
    assert path.read_text(encoding="utf-8") == "mine"
    write_document({"a": 1}, path, force=True)
    assert json.loads(path.read_text(encoding="utf-8")) == {"a": 1}
    assert list(tmp_path.iterdir()) == [path]


def test_failure_leaves_nothing_behind(tmp_path):
    """Where writing fails no file is left, old or new."""
    with pytest.raises(TensorFileError, match="cannot be written"):
        write_document({"a": 1}, tmp_path / "missing" / "out.json")
    with pytest.raises(ValueError, match="not JSON compliant"):
        write_document({"a": float("nan")}, tmp_path / "out.json")

    assert list(tmp_path.iterdir()) == []


def test_written_file_has_usual_permissions(tmp_path):
    """The file can be read by whoever may read other files made in the folder."""
    (tmp_path / "usual").touch()
    write_document({}, tmp_path / "out.json")

    assert stat.S_IMODE((tmp_path / "out.json").stat().st_mode) == stat.S_IMODE((tmp_path / "usual").stat().st_mode)


def test_shape_error_is_an_input_error():
    """Errors of shape end the command with exit code 3."""
    assert issubclass(ShapeError, InputError)
