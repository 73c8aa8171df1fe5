"""The command line as scripts rely on it: documents, exit codes, one clear line for every failure."""

from __future__ import annotations

import gzip
import json
import subprocess
import sys

import pytest

from tests.conftest import ROOT

QUARTZ = "structures/quartz-p3121.cif"
OUTCAR = "tests/data/outputs/OUTCAR.quartz.0006.001.gz"


def run(*arguments):
    """Run the command line in a fresh process."""
    return subprocess.run(
        [sys.executable, "-m", "tensorsym", *map(str, arguments)], cwd=ROOT, capture_output=True, text=True, check=False
    )


@pytest.mark.parametrize("target", ["3m", "-43m", QUARTZ])
def test_allowed_document(target):
    """The JSON document of `allowed` holds the keys that scripts rely on."""
    done = run("allowed", target, "piezoelectric", "--format", "json")
    document = json.loads(done.stdout)

    assert done.returncode == 0
    assert {
        "schema", "property", "law", "group", "axes", "rank", "independent", "independent_components", "relations",
        "zero", "basis", "certificate",
    } <= document.keys()  # fmt: skip
    assert {"hermann_mauguin", "schoenflies", "order"} <= document["group"].keys()
    assert len(document["basis"]) == document["independent"] == len(document["independent_components"])


def test_symmetry_document():
    """The JSON document of `symmetry` holds the keys that scripts rely on."""
    document = json.loads(run("symmetry", QUARTZ, "--format", "json").stdout)

    assert (document["point_group"], document["space_group"], document["number"]) == ("32", "P3_121", 152)
    assert [site["wyckoff"] for site in document["sites"]] == ["3a", "6c"]
    assert {"ladder", "axes", "sites"} <= document.keys()


def test_check_document():
    """The JSON document of `check` holds the keys that scripts rely on, and the run of quartz is consistent."""
    done = run("check", OUTCAR, "--format", "json")
    document = json.loads(done.stdout)

    assert done.returncode == 0
    assert document["verdict"] == "consistent"
    assert {"schema", "group", "axes", "verdict", "tensors"} <= document.keys()
    for tensor in document["tensors"]:
        assert {"property", "verdict", "residual", "threshold", "worst"} <= tensor.keys()


def test_inconsistent_numbers_exit_with_one(tmp_path):
    """Numbers that break the class give exit code 1 and ranked explanations."""
    matrix = tmp_path / "d.txt"
    matrix.write_text("2.31 -2.31 0 0 -0.727 0\n0 0 0 -4.62 0 0.727\n0 0 0 0 0 0\n", encoding="utf-8")
    done = run("check", QUARTZ, matrix, "--property", "piezoelectric", "--format", "json")
    tensor = json.loads(done.stdout)["tensors"][0]

    assert done.returncode == 1
    assert tensor["explanations"]
    assert tensor["broken"]


BAD_FILES = {
    "empty.cif": b"",
    "binary.vasp": bytes(range(256)) * 8,
    "cut.vasp": b"Si\n1.0\n5.43 0 0\n0 5.43 0\n",
    "flat.vasp": b"Si\n1.0\n1 0 0\n2 0 0\n0 0 1\nSi\n1\ndirect\n0 0 0\n",
    "overlap.vasp": b"Si\n1.0\n5 0 0\n0 5 0\n0 0 5\nSi O\n1 1\ndirect\n0 0 0\n0 0 0.001\n",
    "nan.vasp": b"Si\n1.0\n5 0 0\n0 nan 0\n0 0 5\nSi\n1\ndirect\n0 0 0\n",
    "words.cif": b"data_x\n_cell_length_a five\n",
    "broken.json": b'{"structure": {"lattice": ',
}


@pytest.mark.parametrize("name", list(BAD_FILES))
@pytest.mark.parametrize("command", [("symmetry",), ("allowed",), ("check",)])
def test_bad_structures_are_one_line(tmp_path, name, command):
    """A file that cannot be used gives one line that names it, exit code 3 and no traceback."""
    path = tmp_path / name
    path.write_bytes(BAD_FILES[name])
    done = run(*command, path, *(("piezoelectric",) if command == ("allowed",) else ()))

    assert done.returncode == 3
    assert done.stdout == ""
    assert len(done.stderr.splitlines()) == 1
    assert done.stderr.startswith("tensorsym: ")
    assert name in done.stderr


@pytest.mark.parametrize(
    ("arguments", "code", "says"),
    [
        (("allowed", "3mm", "piezoelectric"), 2, "nearest: 3m"),
        (("allowed", "3m", "piezolectric"), 2, "nearest: piezoelectric"),
        (("allowed", "3m"), 2, "law"),
        (("allowed", "3m", "--law", "P_i = d_ijx sigma_jk"), 2, "character"),
        (("allowed", "missing.cif", "piezoelectric"), 3, "no such file"),
        (("allowed", QUARTZ, "piezoelectric", "--axes", "iee"), 2, "nearest: ieee"),
        (("allowed", QUARTZ, "piezoelectric", "--axes", "x=[100] y=[100]"), 2, "degrees"),
        (("symmetry", "missing.cif"), 3, "no such file"),
        (("symmetry", QUARTZ, "--symprec", "-1"), 2, "symprec"),
        (("check", QUARTZ), 3, "tensors"),
        (("check", QUARTZ, "missing.json"), 3, "no such file"),
        (("properties", "xyzzy"), 2, "no property"),
        (("alowed", "3m"), 2, "nearest: allowed"),
    ],
)
def test_wrong_usage_is_one_line(arguments, code, says):
    """Every wrong call gives one line with the next step, and the right exit code."""
    done = run(*arguments)

    assert done.returncode == code
    assert len(done.stderr.splitlines()) == 1
    assert says in done.stderr


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("{", "no JSON"),
        ('{"schema": "tensorsym/tensor/1", "property": "piezoelectric"}', "'values' is missing"),
        ('{"schema": "tensorsym/tensor/1", "proprety": "piezoelectric", "values": []}', "nearest: property"),
        ('{"schema": "tensorsym/tensor/1", "property": "piezoelectric", "values": [[1, 2], [3, 4]]}', "shape (2, 2)"),
        ('{"schema": "tensorsym/tensor/1", "property": "dielectric", "values": [[1,0,0],[0,NaN,0],[0,0,1]]}', "(2, 2)"),
        ('{"schema": "tensorsym/tensor/1", "property": "dielectric", "values": [[1,0,0],[0,"x",0],[0,0,1]]}', "(2, 2)"),
        ('{"schema": "tensorsym/tensor/9", "property": "dielectric", "values": []}', "schema"),
    ],
)
def test_bad_tensor_files_are_one_line(tmp_path, text, says):
    """A damaged tensor file is refused with the key or the place named, and nothing is written."""
    path, target = tmp_path / "t.json", tmp_path / "out.json"
    path.write_text(text, encoding="utf-8")
    done = run("check", QUARTZ, path, "--write", target)

    assert done.returncode == 3
    assert len(done.stderr.splitlines()) == 1
    assert says in done.stderr
    assert list(tmp_path.iterdir()) == [path]


@pytest.mark.parametrize(
    ("spoil", "says"),
    [
        (lambda text: text[: text.index("PIEZOELECTRIC TENSOR  for field") + 300], "cut off"),
        (lambda text: text.replace("  x    -1.15872", "  x    ********"), "is no row of"),
    ],
)
def test_damaged_output_names_the_line(tmp_path, spoil, says):
    """A truncated table or asterisks in place of numbers are refused with the line."""
    text = gzip.decompress((ROOT / OUTCAR).read_bytes()).decode()
    path = tmp_path / "OUTCAR"
    path.write_text(spoil(text), encoding="utf-8")
    done = run("check", path)

    assert done.returncode == 3
    assert says in done.stderr
    assert len(done.stderr.splitlines()) == 1


@pytest.mark.parametrize("command", ["allowed", "check", "symmetry", "properties"])
def test_help_has_an_example(command):
    """The help of every command shows a worked example."""
    done = run(command, "--help")

    assert done.returncode == 0
    assert f"tensorsym {command}" in done.stdout


def test_many_files_get_a_line_each(tmp_path):
    """With --each every file gets one line, a bad one does not stop the others, and the worst exit code is returned."""
    bad = tmp_path / "empty"
    bad.write_bytes(b"")
    done = run("check", "--each", OUTCAR, bad, OUTCAR)

    assert done.returncode == 3
    assert [line.split(": ")[1] for line in done.stdout.splitlines()] == [
        "consistent, 4 tensors",
        "not checked",
        "consistent, 4 tensors",
    ]
