from __future__ import annotations

import gzip
import random
import shutil

import pytest

from tensorsym.errors import TensorsymError, UnknownNameError
from tensorsym.outputs.content import Content
from tensorsym.outputs.read import read_output, read_tensors
from tensorsym.outputs.recognise import READERS, reader_for
from tests.conftest import ROOT

DATA = ROOT / "tests" / "data" / "outputs"
KNOWN = {
    "OUTCAR.quartz.0006.001.gz": "vasp-outcar",
    "OUTCAR.sic.trimmed.gz": "vasp-outcar",
    "OUTCAR.li2o.trimmed.gz": "vasp-outcar",
    "OUTCAR.silicon.trimmed.gz": "vasp-outcar",
    "vasprun.al2o3.trimmed.xml.gz": "vasp-xml",
    "vasprun.silicon.trimmed.xml.gz": "vasp-xml",
    "alas-wurtzite.ph.out": "espresso-phonon",
    "alas-zincblende.ph.out": "espresso-phonon",
    "alas-wurtzite.dynG": "espresso-dynamical",
    "alas-wurtzite.tensors.xml": "espresso-tensors",
    "selenium.anaddb.out": "abinit-anaddb",
    "selenium.trimmed.abo": "abinit",
    "BC2N-Pmm2-Raman.castep": "castep",
    "BN_R3m.test.efield": "castep-efield",
}
WITHOUT_READER = ("al2o3.BORN", "al2o3.POSCAR", "piezoelectric-rows.jsonl", "elastic-row.json")


@pytest.mark.parametrize(("name", "reader"), KNOWN.items())
def test_content_decides_and_not_the_name(tmp_path, name, reader):
    """A file is recognised under any name; no second reader claims it."""
    path = tmp_path / "a.cif"
    shutil.copy(DATA / name, path)
    content = Content(path)

    assert [known.name for known in READERS if known.is_in(content)] == [reader]
    assert reader_for(content).name == reader


@pytest.mark.parametrize("path", [DATA / name for name in WITHOUT_READER] + sorted((ROOT / "structures").glob("*.cif")))
def test_other_files_are_claimed_by_no_reader(path):
    """Structure files, documents and BORN files are taken for no output of a calculation."""
    assert reader_for(Content(path)) is None


def test_every_data_file_is_accounted_for():
    """Every file in the folder of data is in one of the lists above."""
    names = {path.name for path in DATA.iterdir()} - {"ORIGINS.md"}

    assert names == {*KNOWN, *WITHOUT_READER}


def test_reader_can_be_asked_for(tmp_path):
    """A reader asked for is used although the first line is gone; an unknown name is answered with the nearest."""
    text = gzip.decompress((DATA / "OUTCAR.sic.trimmed.gz").read_bytes()).decode()
    path = tmp_path / "OUTCAR"
    path.write_text(text.partition("\n")[2], encoding="utf-8")

    with pytest.raises(TensorsymError, match="no output known to hold tensors"):
        read_output(path)
    assert len(read_output(path, reader="vasp-outcar").tensors) == 10
    with pytest.raises(UnknownNameError, match="nearest: vasp-outcar"):
        read_output(path, reader="vasp-outcr")


def test_tensors_of_an_output_serve_as_a_tensor_file():
    """An output may be given where a tensor file is asked for."""
    records = read_tensors(DATA / "selenium.anaddb.out")

    assert {"elastic-stiffness", "piezoelectric", "born-charge"} <= {record.property for record in records}


@pytest.mark.parametrize("name", KNOWN)
@pytest.mark.parametrize("seed", range(12))
def test_any_damage_is_an_error_of_ours(tmp_path, name, seed):
    """A file with parts cut out, doubled or overwritten is read or refused, and never ends in a foreign error."""
    data = (DATA / name).read_bytes()
    text = (gzip.decompress(data) if name.endswith(".gz") else data).decode("utf-8", errors="replace")
    path = tmp_path / "damaged"
    path.write_text(_damaged(text, random.Random(f"{name} {seed}")), encoding="utf-8")  # noqa: S311

    error, output = _outcome(path)

    assert error is None or (error.exit_code == 3 and "\n" not in str(error))
    assert output is None or all(record.values.size for record in output.tensors)


def _outcome(path):
    try:
        return None, read_output(path)
    except TensorsymError as error:
        return error, None


def _damaged(text, source):
    """Return a text damaged in one to four places."""
    for _ in range(source.randint(1, 4)):
        start = source.randrange(len(text))
        end = min(len(text), start + source.choice([1, 5, 40, 400, 4000]))
        change = source.choice(["", "*" * 12, "NaN", "1e999", text[start:end] * 2, "\n", "-", "<", "0", "\x0b\u2028"])
        text = text[:start] + change + text[end:]
        if len(text) < 10:
            break
    return text
