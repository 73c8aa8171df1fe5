from __future__ import annotations

import bz2
import contextlib
import gzip
import lzma
import os
import re

import numpy as np
import pytest

from tensorsym.crystal import text_file
from tensorsym.crystal.read import FORMATS, crystal_in_text, read
from tensorsym.errors import StructureError, UsageError
from tests.crystal.texts import ALL, BOHR, CIF, JSON, POSCAR, VASPRUN, A, C, U

COMPRESSED = [
    pytest.param(gzip.compress, "gz", id="gzip"),
    pytest.param(bz2.compress, "bz2", id="bzip2"),
    pytest.param(lzma.compress, "xz", id="xz"),
]


def nearest_neighbours(crystal):
    """Return the shortest distances between unlike atoms, with all images in reach."""
    steps = np.array(list(np.ndindex(5, 5, 5))) - 2.0
    unlike = np.array(crystal.species)[:, None] != np.array(crystal.species)[None]
    apart = crystal.positions[:, None, None] - crystal.positions[None, :, None] + steps
    distances = np.linalg.norm(apart @ crystal.lattice, axis=3)[unlike]
    return np.sort(distances.ravel())[:8]


@pytest.mark.filterwarnings("ignore")  # ASE's own
@pytest.mark.parametrize("name", list(ALL))
def test_every_format_gives_the_same_crystal(name, tmp_path):
    """Wurtzite is read from each format, told by its content, with the same group, cell and bond lengths."""
    path = tmp_path / "file"
    path.write_text(ALL[name], encoding="utf-8")
    crystal = read(path, symprec=1e-4)

    assert crystal.format == name
    assert crystal.symmetry.international == "P6_3mc"
    assert sorted(crystal.species) == ["O", "O", "Zn", "Zn"]
    assert np.linalg.norm(crystal.lattice, axis=1) == pytest.approx([A, A, C], abs=1e-6)
    along, across = U * C, np.hypot(A / 3**0.5, (0.5 - U) * C)
    assert nearest_neighbours(crystal) == pytest.approx(sorted([along] * 4 + [across] * 12)[:8], abs=1e-6)


@pytest.mark.parametrize("name", [name for name in ALL if name != "aims"])
def test_only_one_format_claims_a_text(name):
    """The marks of a format are in no text of another one, so the order of trying does not matter."""
    assert sum(known.is_in(ALL[name]) for known in FORMATS) == 1


@pytest.mark.parametrize(("text", "name", "expected"), [
    (CIF, "POSCAR", "CIF"), (POSCAR, "quartz.cif", "POSCAR"), (JSON, "vasprun.xml", "pymatgen JSON"),
    (VASPRUN, "structure.json", "vasprun.xml"), (POSCAR, "OUTCAR", "POSCAR"),
])  # fmt: skip
def test_content_decides_and_not_the_name(text, name, expected, tmp_path):
    """A misleading name changes nothing."""
    (tmp_path / name).write_text(text, encoding="utf-8")

    assert read(tmp_path / name).format == expected


@pytest.mark.parametrize(("compress", "suffix"), COMPRESSED)
@pytest.mark.parametrize("named", [True, False])
def test_compressed_files_are_read(compress, suffix, named, tmp_path):
    """Compression is told by the first bytes, with or without its suffix."""
    path = tmp_path / (f"POSCAR.{suffix}" if named else "POSCAR")
    path.write_bytes(compress(POSCAR.encode()))

    assert read(path).symmetry.number == 186


@pytest.mark.parametrize("encoding", ["utf-8-sig", "utf-16"])
def test_byte_order_marks_are_understood(encoding, tmp_path):
    """A text file saved with a byte order mark is read."""
    (tmp_path / "a.cif").write_bytes(CIF.replace("\n", "\r\n").encode(encoding))

    assert read(tmp_path / "a.cif").symmetry.number == 186


BROKEN = [
    pytest.param(b"", "is empty", id="empty"),
    pytest.param(b" \n\n", "is empty", id="blank"),
    pytest.param(b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR", "is a binary file, not text; expected CIF, POSCAR", id="binary"),
    pytest.param(b"Dear editor,\nplease find enclosed\n", "is of no format known; expected CIF, POSCAR", id="letter"),
    pytest.param(gzip.compress(POSCAR.encode())[:-20], "cannot be decompressed.*cut off", id="cut-gzip"),
    pytest.param(bz2.compress(POSCAR.encode())[:-20], "cannot be decompressed.*cut off", id="cut-bzip2"),
    pytest.param(lzma.compress(POSCAR.encode())[:-20], "cannot be decompressed.*cut off", id="cut-xz"),
    pytest.param(b"\x1f\x8b\x08garbage in the middle", "cannot be decompressed", id="damaged-gzip"),
    pytest.param(gzip.compress(b""), "is empty", id="empty-gzip"),
]


@pytest.mark.parametrize(("content", "message"), BROKEN)
def test_broken_file_is_one_clear_line(content, message, tmp_path):
    """A file that is no structure is refused in one line that begins with its path; the exit code is 3."""
    path = tmp_path / "thing"
    path.write_bytes(content)
    with pytest.raises(StructureError, match=message) as caught:
        read(path)

    assert str(caught.value).startswith(f"{path}: ")
    assert "\n" not in str(caught.value)
    assert caught.value.exit_code == 3


def test_missing_file_and_folder_are_told(tmp_path):
    """A path to nothing and a path to a folder are told apart."""
    with pytest.raises(StructureError, match="no such file"):
        read(tmp_path / "nothing.cif")
    with pytest.raises(StructureError, match="is a folder"):
        read(tmp_path)


@pytest.mark.skipif(os.geteuid() == 0, reason="nothing is forbidden to root")
def test_unreadable_file_is_told(tmp_path):
    """A file without permission is told with the system's reason."""
    path = tmp_path / "POSCAR"
    path.write_text(POSCAR)
    path.chmod(0)

    with pytest.raises(StructureError, match="cannot be read: Permission denied"):
        read(path)


def test_name_with_a_null_character_is_told():
    """A path that no system can have is an error of ours, not a foreign one."""
    with pytest.raises(StructureError, match="cannot be read"):
        read("a\0b")


def test_swelling_archive_is_refused(tmp_path, monkeypatch):
    """Reading stops at the limit of size, however much the archive would unpack to."""
    monkeypatch.setattr(text_file, "LARGEST_FILE", 2**20)
    (tmp_path / "bomb.gz").write_bytes(gzip.compress(b"0" * 2**24))

    with pytest.raises(StructureError, match="is larger than 1 MB"):
        read(tmp_path / "bomb.gz")


@pytest.mark.parametrize(("name", "message"), [
    ("broken.cif", "stands before any data_ block"), ("POSCAR", "the file ends after line 1"),
    ("vasprun.xml", "the XML is broken"), ("OUTCAR", "holds no species"), ("a.json", "is no JSON document"),
    ("a.xsf", "holds no PRIMCOORD"), ("a.xyz", "'nonsense' is no whole number"),
])  # fmt: skip
def test_name_tells_the_format_of_a_ruin(name, message, tmp_path):
    """Where the content tells nothing the name says what was expected."""
    (tmp_path / name).write_text("nonsense\n")

    with pytest.raises(StructureError, match=message):
        read(tmp_path / name)


@pytest.mark.parametrize("name", [name for name in ALL if name != "aims"])
@pytest.mark.parametrize("share", [0.2, 0.4, 0.6, 0.8, 0.95])
def test_truncated_text_never_escapes(name, share):
    """A text cut anywhere is either still complete or refused by an error of ours in one line."""
    text = ALL[name][: int(share * len(ALL[name]))]
    with contextlib.suppress(StructureError):
        assert len(crystal_in_text(text, "cut").species) in {2, 4}


RUBBISH = (
    "nan", "-1", "0", "999999999", "x", "'", '"', ";", "loop_", "data_", "_", "[", "{", "}", "<", ">", "/", "=", "(",
    "*", "1.0.0", "\n", "", "é", "#", "null", "[]", '""', "0.0",
)  # fmt: skip


@pytest.mark.parametrize("seed", range(20))
@pytest.mark.parametrize("name", [name for name in ALL if name != "aims"])
def test_damaged_text_never_escapes(name, seed):
    """A text with a few words lost, doubled or replaced by rubbish gives a crystal or an error of ours in one line."""
    random = np.random.default_rng(seed)
    words = re.split(r"(\s+|[,\"<>=(){}\[\]:])", ALL[name])
    for place in random.integers(len(words), size=1 + seed % 4):
        words[place] = (words[place] if random.random() < 0.2 else "") + RUBBISH[random.integers(len(RUBBISH))]
    with contextlib.suppress(StructureError):
        assert "class" in repr(crystal_in_text("".join(words), "damaged").symmetry)


NUMBERS = {
    "CIF": "0.6667", "POSCAR": "0.3820000000", "vasprun.xml": "0.3820000000", "OUTCAR": "0.38200000",
    "pw.x input": "0.3820000000", "output of Quantum ESPRESSO": f"{U * C / A:.10f}",
    "XML of pw.x": f"{U * C / BOHR:.10f}", "XSF": f"{U * C:.10f}", "extended XYZ": f"{U * C:.10f}",
}  # fmt: skip
"""A coordinate as it stands in each text."""


@pytest.mark.parametrize("name", NUMBERS)
@pytest.mark.parametrize("word", ["nan", "-inf", "1e999", "1_0", "0x1"])
def test_numbers_that_are_none_are_refused(name, word):
    """A coordinate that is not finite, or only a number for Python, is refused."""
    assert NUMBERS[name] in ALL[name]

    with pytest.raises(StructureError, match=r"not finite|is no number"):
        crystal_in_text(ALL[name].replace(NUMBERS[name], word, 1), "file")


def test_tolerance_is_kept_and_checked(tmp_path):
    """The tolerance goes into the crystal, and an impossible one is wrong usage."""
    (tmp_path / "POSCAR").write_text(POSCAR)

    assert read(tmp_path / "POSCAR", symprec=0.01).symmetry.symprec == 0.01
    with pytest.raises(UsageError, match="is no tolerance"):
        read(tmp_path / "POSCAR", symprec=0.0)
