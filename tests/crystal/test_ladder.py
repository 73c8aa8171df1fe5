from __future__ import annotations

import numpy as np
import pytest

from tensorsym.crystal.crystal import Crystal
from tensorsym.crystal.ladder import STEPS, displacements_to, plateaus_in_words
from tensorsym.crystal.symmetry import symmetry_of
from tests.crystal.test_symmetry import rock_salt


def displaced(shift, **fields):
    """Return caesium chloride with its second atom moved along z by a shift in Å."""
    return Crystal(4.0 * np.eye(3), [[0, 0, 0], [0.5, 0.5, 0.5 + shift / 4.0]], ("Cs", "Cl"), **fields)


def test_ladder_has_a_step_for_every_tolerance():
    """An exact crystal has one group on the whole ladder."""
    ladder = displaced(0.0).ladder

    assert [step.symprec for step in ladder] == list(STEPS)
    assert {(step.number, step.international, step.point_group) for step in ladder} == {(221, "Pm-3m", "m-3m")}


def test_ladder_shows_where_the_group_changes():
    """A displacement of 0.004 Å is seen at tight tolerances and not at loose ones."""
    crystal = displaced(0.004)

    assert [step.point_group for step in crystal.ladder] == ["4mm", "4mm", "4mm", "m-3m", "m-3m"]
    assert plateaus_in_words(crystal.ladder) == "P4mm (99) from 1e-05 to 0.001, Pm-3m (221) from 0.01 to 0.1"


def test_change_near_the_tolerance_is_warned_of_with_the_atoms_behind_it():
    """The warning names the group next door, the tolerance, the atoms that decide and how far they are."""
    warnings = displaced(0.004).symmetry_warnings

    assert len(warnings) == 1
    assert warnings[0].startswith("at symprec 0.01 the space group is Pm-3m (221), class m-3m, not P4mm (99)")
    assert "farthest from Pm-3m: Cs (atom 1), Cl (atom 2), by up to 0.002 Å" in warnings[0]


def test_change_on_the_tight_side_is_warned_of():
    """A group that is lost at a tenth of the tolerance is doubtful too."""
    warnings = displaced(0.004, symprec=0.02).symmetry_warnings

    assert len(warnings) == 1
    assert warnings[0].startswith("at symprec 0.002 the space group is P4mm (99)")


@pytest.mark.parametrize("shift", [0.0, 1e-6, 0.2])
def test_no_warning_far_from_a_change(shift):
    """A crystal that is exact, nearly exact, or clearly distorted gets no warning."""
    assert displaced(shift).symmetry_warnings == ()


def test_shape_of_the_cell_may_decide():
    """A cubic crystal in a cell stretched by 0.05 % is warned of, and no atom is blamed."""
    crystal = Crystal(np.diag([4.0, 4.0, 4.002]), [[0, 0, 0], [0.5, 0.5, 0.5]], ("Cs", "Cl"))

    assert crystal.point_group.hermann_mauguin == "4/mmm"
    assert "the shape of the cell decides, not the atoms" in crystal.symmetry_warnings[0]


def test_displacements_lead_to_the_higher_symmetry():
    """Moving every atom by its displacement gives a crystal with the higher group at a tight tolerance."""
    crystal = displaced(0.004)
    higher = symmetry_of(crystal, 0.01)
    moved = crystal.positions + displacements_to(crystal, higher) @ np.linalg.inv(crystal.lattice)

    assert Crystal(crystal.lattice, moved, crystal.species, symprec=1e-6).symmetry.number == higher.number


def test_broken_supercell_is_warned_of():
    """The user learns that the group is the crystal's, not that of the shape of the cell."""
    assert any("supercell" in line for line in rock_salt(copies=(1, 1, 2)).symmetry_warnings)
