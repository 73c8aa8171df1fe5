from __future__ import annotations

import io

import numpy as np
import pytest

from tensorsym.errors import InputError, UsageError
from tensorsym.outputs.read import read_tensors


def saved(folder, array, **options):
    """Save an array where a reader can find it."""
    path = folder / "tensor.dat"
    with path.open("wb") as stream:
        np.save(stream, array, **options)
    return path


@pytest.mark.parametrize("dtype", ["f8", ">f4", "i2", "u1"])
@pytest.mark.parametrize("order", ["C", "F"])
def test_full_tensor(tmp_path, dtype, order):
    """A full tensor is read in any real type and either layout, known by content and not by name."""
    array = np.asarray(np.arange(27).reshape(3, 3, 3), dtype=dtype, order=order)
    (record,) = read_tensors(saved(tmp_path, array), property="piezoelectric")

    assert (record.values == array).all()
    assert record.digits is None


def test_matrix_notation_and_sites(tmp_path):
    """A 6 x 6 matrix is unfolded; one tensor an atom stays."""
    stiffness = np.arange(36.0).reshape(6, 6)
    (record,) = read_tensors(saved(tmp_path, stiffness), property="elastic-stiffness", order="11 22 33 12 23 13")
    charges = np.arange(36.0).reshape(4, 3, 3)
    (sites,) = read_tensors(saved(tmp_path, charges), property="born-charge", atoms=4)

    assert record.values[0, 1, 1, 2] == stiffness[3, 4]
    assert (sites.values == charges).all()
    assert sites.per_site


class Danger:
    """An object that would run code when it is unpickled."""

    def __reduce__(self):
        """Ask for an exit."""
        return SystemExit, ("unpickled",)


@pytest.mark.parametrize(
    ("array", "says"),
    [
        (np.array([Danger()], dtype=object), "an array of object; expected real numbers"),
        (np.zeros((3, 3), dtype=complex), "an array of complex128"),
        (np.array(["a"] * 9), "an array of <U1"),
        (np.full((3, 3), np.nan), r"the number at \(1, 1\) is not finite"),
        (np.ones((2, 2)), "numbers in 2 x 2 do not fit"),
        (np.ones(3**10 * 100 + 1, dtype="u1"), "is too large"),
    ],
)
def test_other_arrays_are_refused(tmp_path, array, says):
    """Objects are never unpickled; complex numbers, text, NaN and wrong shapes are refused."""
    path = saved(tmp_path, array, allow_pickle=array.dtype == object)

    with pytest.raises(InputError, match=says):
        read_tensors(path, property="dielectric")


@pytest.mark.parametrize("length", [7, 9, 40, 130])
def test_cut_file_is_refused(tmp_path, length):
    """A file that is cut off in its head or its numbers is refused."""
    stream = io.BytesIO()
    np.save(stream, np.ones((3, 3)))
    path = tmp_path / "tensor.npy"
    path.write_bytes(stream.getvalue()[:length])

    with pytest.raises(InputError, match=r"damaged \.npy|unknown version|binary"):
        read_tensors(path, property="dielectric")


def test_property_must_be_named(tmp_path):
    """An array says not what it holds."""
    with pytest.raises(UsageError, match="--property"):
        read_tensors(saved(tmp_path, np.eye(3)))
