from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.crystal import Crystal
from tensorsym.errors import StructureError, UsageError

CUBE = 4.0 * np.eye(3)
PLACES = [[0.0, 0.0, 0.0], [0.5, 0.5, 0.5]]
SPECIES = ("Cs", "Cl")
NAN = float("nan")

BAD = [
    pytest.param(np.eye(2), PLACES, SPECIES, r"lattice of shape \(2, 2\).*three vectors", id="lattice-shape"),
    pytest.param([[4, 0, 0], [0, 4, 0], [4, 4, 0]], PLACES, SPECIES, "span no proper cell: volume 0", id="flat"),
    pytest.param(np.zeros((3, 3)), PLACES, SPECIES, "span no proper cell", id="zero"),
    pytest.param(1e9 * CUBE, PLACES, SPECIES, r"cell edges of .* at most 10000 Å; check the unit", id="huge"),
    pytest.param([[4, 0, 0], [0, NAN, 0], [0, 0, 4]], PLACES, SPECIES, r"not finite, at \(2, 2\)", id="lattice-nan"),
    pytest.param(CUBE, [[0, 0, 0], [0, np.inf, 0]], SPECIES, r"positions .*not finite, at \(2, 2\)", id="position-inf"),
    pytest.param(CUBE, PLACES, ("Cs",), r"positions of shape \(2, 3\) for 1 species", id="count"),
    pytest.param(CUBE, [[0, 0], [1, 1]], SPECIES, "positions of shape", id="two-coordinates"),
    pytest.param(CUBE, [["a", 0, 0]], ("Cs",), "no array of numbers", id="words"),
    pytest.param(CUBE, np.zeros((0, 3)), (), "holds no atoms", id="empty"),
    pytest.param(CUBE, [[0, 0, 0], [0.999, 0, 0.01]], SPECIES, r"1 \(Cs\) and 2 \(Cl\) overlap: 0.04", id="overlap"),
    pytest.param(CUBE, [[0, 0, 0], [1, 0, 0]], ("O", "O"), "1 and 2 are the same O atom listed twice", id="twice"),
]


@pytest.mark.parametrize(("lattice", "positions", "species", "message"), BAD)
def test_impossible_crystal_is_refused(lattice, positions, species, message):
    """Parts that make no crystal are refused in one line that names them."""
    with pytest.raises(StructureError, match=message) as caught:
        Crystal(lattice, positions, species, source="a-file")

    assert str(caught.value).startswith("a-file: ")
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("symprec", [0, -1e-3, NAN, float("inf"), "small"])
def test_impossible_tolerance_is_wrong_usage(symprec):
    """A tolerance that is no positive number is an error of the question, not of the file."""
    with pytest.raises(UsageError, match="is no tolerance"):
        Crystal(CUBE, PLACES, SPECIES, symprec=symprec)


def test_too_many_atoms_are_refused(monkeypatch):
    """A file cannot ask for more atoms than the limit."""
    monkeypatch.setattr("tensorsym.crystal.validation.MOST_ATOMS", 1)

    with pytest.raises(StructureError, match="2 atoms are too many"):
        Crystal(CUBE, PLACES, SPECIES)


def test_arrays_are_copied_and_read_only():
    """A crystal keeps no reference to what it was given, and its own arrays cannot be written to."""
    lattice = CUBE.copy()
    crystal = Crystal(lattice, np.array(PLACES), SPECIES)
    lattice[0, 0] = 9.0

    assert crystal.lattice[0, 0] == 4.0
    assert not any(array.flags.writeable for array in (crystal.lattice, crystal.positions, crystal.numbers))


def test_facts_are_found_once():
    """Symmetry, ladder and sites are found when first asked for, and then kept."""
    crystal = Crystal(CUBE, PLACES, SPECIES)

    assert crystal.symmetry is crystal.symmetry
    assert crystal.ladder is crystal.ladder
    assert crystal.sites is crystal.sites


def test_other_tolerance_makes_another_crystal():
    """A crystal at another tolerance shares the atoms but not the symmetry."""
    displaced = Crystal(CUBE, [[0, 0, 0], [0.505, 0.5, 0.5]], SPECIES)

    assert displaced.point_group.hermann_mauguin == "4mm"
    assert displaced.at(0.1).point_group.hermann_mauguin == "m-3m"
    assert displaced.symprec == 1e-3


def test_formula_counts_species():
    """The formula is in lowest terms and in the order of the file; labels of mixed sites stand in parentheses."""
    places = [[0.1 * step, 0, 0] for step in range(6)]
    crystal = Crystal(10.0 * np.eye(3), places, ("Si", "Si", "K0.5Na0.5", "K0.5Na0.5", "O", "O"))

    assert crystal.formula == crystal.title == "Si(K0.5Na0.5)O"


def test_numbers_tell_species_apart():
    """Equal labels have equal numbers, different ones do not."""
    assert Crystal(CUBE, [[0, 0, 0], [0.5, 0, 0], [0, 0.5, 0]], ("A", "B", "A")).numbers.tolist() == [1, 2, 1]
