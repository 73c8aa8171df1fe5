"""The check of many tensors against what spglib alone needs, and against pymatgen's fit of a tensor to a structure."""

from __future__ import annotations

import gzip
import json
import statistics
import warnings
from dataclasses import replace

import numpy as np
import pytest

from tensorsym.crystal.formats_json import crystal_in_document
from tensorsym.tasks.check import check_tensor
from tests.benchmarks.timing import seconds

ROUNDS = 7


@pytest.fixture(scope="module")
def rows(data_folder):
    """Return crystals and piezoelectric tensors of the published set (de Jong et al. 2015)."""
    path = data_folder / "open-tensors" / "piezoelectric_tensor.jsonl.gz"
    with gzip.open(path, "rt") as lines:
        documents = [json.loads(line) for line in lines]
    return [
        (crystal_in_document(document, document["id"]), np.array(document["tensors"]["piezoelectric"]["values"]))
        for document in documents
    ]


def fresh(rows):
    """Return the rows with crystals that have found no symmetry yet."""
    copies = [(replace(crystal), values) for crystal, values in rows]
    for crystal, _ in copies:
        crystal.numbers  # noqa: B018  a reader's work, not the check's
    return copies


# Called as its users call it, spglib 2.7 and 2.8 announce a change of their error handling.
@pytest.mark.filterwarnings("ignore::DeprecationWarning")
def test_against_spglib_alone(rows):
    """Checking all rows takes at most 1.3 times what spglib's data set takes on the same cells."""
    import spglib

    cells = [(crystal.lattice, crystal.positions, crystal.numbers) for crystal, _ in fresh(rows)]
    ratios = []
    for _ in range(ROUNDS):
        copies = fresh(rows)
        alone = seconds(lambda: [spglib.get_symmetry_dataset(cell, symprec=1e-3) for cell in cells])
        ours = seconds(
            lambda copies=copies: [check_tensor(c, v, "piezoelectric-stress").is_consistent for c, v in copies]
        )
        ratios.append(ours / alone)
    spread = f"{min(ratios):.2f} to {max(ratios):.2f}"
    print(f"\n{len(rows)} checks: {statistics.median(ratios):.2f} times spglib alone ({spread})")

    assert statistics.median(ratios) <= 1.3


@pytest.mark.filterwarnings("ignore::DeprecationWarning")
def test_against_fit_to_structure(rows):
    """Checking all rows is at least 2.5 times faster than pymatgen's projection of a tensor onto a structure."""
    from pymatgen.analysis.piezo import PiezoTensor
    from pymatgen.core import Structure

    pairs = []
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        for crystal, values in rows:
            species = [f"{label}" for label in crystal.species]
            pairs.append((Structure(crystal.lattice, species, crystal.positions), PiezoTensor.from_voigt(values)))
        ratios = []
        for _ in range(3):
            copies = fresh(rows)
            theirs = seconds(lambda: [tensor.fit_to_structure(structure, symprec=1e-3) for structure, tensor in pairs])
            ours = seconds(
                lambda copies=copies: [check_tensor(c, v, "piezoelectric-stress").is_consistent for c, v in copies]
            )
            ratios.append(theirs / ours)
    print(f"\n{len(rows)} checks: {statistics.median(ratios):.1f} times faster than fit_to_structure")

    assert statistics.median(ratios) >= 2.5
