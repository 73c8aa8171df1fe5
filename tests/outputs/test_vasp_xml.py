from __future__ import annotations

import gzip

import numpy as np
import pytest

from tensorsym.errors import InputError
from tensorsym.outputs.read import read_output
from tests.conftest import ROOT
from tests.outputs.group_average import residual

DATA = ROOT / "tests" / "data" / "outputs"
ALUMINA, SILICON = DATA / "vasprun.al2o3.trimmed.xml.gz", DATA / "vasprun.silicon.trimmed.xml.gz"


def text_of(path):
    """Return the text of a packed file."""
    return gzip.decompress(path.read_bytes()).decode()


def written(folder, text):
    """Write a text where a reader can find it."""
    path = folder / "vasprun.xml"
    path.write_text(text, encoding="utf-8")
    return path


def records_of(path):
    """Return the records by property and contribution."""
    return {(record.property, record.contribution): record for record in read_output(path).tensors}


# Read by eye in the files.
@pytest.mark.parametrize(
    ("path", "key", "place", "value"),
    [
        (ALUMINA, ("dielectric", "electronic"), (0, 2), -0.01281925),
        (ALUMINA, ("dielectric", "independent"), (1, 1), 3.33838612),
        (SILICON, ("dielectric", "electronic"), (1, 1), 13.07230825),
        (SILICON, ("dielectric", "ionic"), (1, 2), -0.00000002),
        (SILICON, ("born-charge", ""), (0, 0, 1), -0.00009718),
        (SILICON, ("born-charge", ""), (1, 2, 0), 0.00024478),
    ],
)
def test_number_stands_where_the_eye_finds_it(path, key, place, value):
    """A number of the XML becomes the right component."""
    assert records_of(path)[key].values[place] == value


def test_residual_is_that_of_the_index():
    """The dielectric tensor of Al2O3 has the residual 7e-7 of the shared index, found there independently."""
    output = read_output(ALUMINA)
    record = next(record for record in output.tensors if record.contribution == "electronic")

    assert output.crystal.symmetry.number == 167
    assert residual(output.crystal, record) == pytest.approx(7e-7, rel=0.08)


def test_ionic_part_is_tiny_and_incomplete():
    """The ionic part of silicon has the norm 5e-8 of the index, eight decimals, and is no tensor by itself."""
    record = records_of(SILICON)["dielectric", "ionic"]

    assert np.linalg.norm(record.values) == pytest.approx(5e-8, rel=0.1)
    assert record.digits == pytest.approx(1e-8)
    assert not record.complete


def test_run_that_breaks_off_is_told(tmp_path):
    """XML cut behind whole tensors gives them with a note."""
    text = text_of(SILICON)
    output = read_output(written(tmp_path, text[: text.index("</calculation>")]))

    assert len(output.tensors) == len(read_output(SILICON).tensors)
    assert any("breaks off" in note for note in output.notes)


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("13.07230257", "***********", "epsilon.*no row of 3 numbers.*did not fit"),
        ("13.07230257", "NaN", "epsilon.*no row of 3 numbers.*failed"),
        ("<v>      -0.00759234       0.00007458       0.00000063 </v>", "", "atom 2 Si.*cut off after 2 of 3 rows"),
        ("<modeling>", "<!DOCTYPE a [<!ENTITY b 'c'>]><modeling>", "document type"),
    ],
)
def test_damaged_xml_is_refused(tmp_path, old, new, says):
    """Words that are no numbers, missing rows and document types are refused."""
    text = text_of(SILICON)
    assert old in text

    with pytest.raises(InputError, match=says):
        read_output(written(tmp_path, text.replace(old, new, 1)))
