"""Which components a crystal or a group allows: the question before a measurement."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING, Any

from tensorsym.catalog.properties import Property, property_named
from tensorsym.errors import UsageError
from tensorsym.groups.placement import element_in_words, elements_in_words
from tensorsym.groups.point_group import PointGroup
from tensorsym.groups.symbols import point_group_named
from tensorsym.invariants.axes import space_in_axes
from tensorsym.invariants.relations import (
    Combination,
    combination_text,
    component_names,
    matrix_factor,
    matrix_relations,
)
from tensorsym.invariants.solver import invariant_space
from tensorsym.tensors.law import Law, parse_law
from tensorsym.tensors.notation import indices_of_entry
from tensorsym.tensors.words import word_of

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    import numpy as np
    from numpy.typing import NDArray

    from tensorsym.crystal.crystal import Crystal
    from tensorsym.invariants.space import Certificate, InvariantSpace
    from tensorsym.tensors.axes import Axes
    from tensorsym.tensors.kind import TensorKind

MOST_EXPLAINED = 2000
"""Kinds with more components than this are not explained component by component."""


@dataclass(frozen=True, eq=False)
class AllowedForm:
    """The form of a property that a group allows, in stated axes.

    Component names are those of matrix notation (``d14``, ``c66``); the factors between matrix entries and tensor
    components are `factors`.
    """

    law: Law
    """The law that defines the property."""
    factors: tuple[int, ...]
    """Factor of the shear digits of each index pair in matrix notation."""
    group: PointGroup
    """The class, in the setting of its standard frame."""
    axes: Axes | None
    """The axes of the components, seen from the file; None for the standard frame of a named group."""
    space: InvariantSpace
    """The allowed tensors in those axes."""
    row: Property | None = None
    """The catalogue's row, None for a law of the user's own."""
    crystal: Crystal | None = None
    """The crystal, None for a named group."""
    notes: tuple[str, ...] = ()
    """What the reader has to know beside the form."""

    def __repr__(self) -> str:
        """Return one line: what, for which class, how many components."""
        what = self.row.name if self.row else self.law.text
        return f"AllowedForm({what}, {self.group.hermann_mauguin}: {' '.join(self.independent_components[:10])})"

    @property
    def symbol(self) -> str:
        """Symbol of the property."""
        return self.law.symbol

    @property
    def kind(self) -> TensorKind:
        """Rank, parity, time behaviour and index symmetry."""
        return self.law.kind

    @property
    def independent(self) -> int:
        """Number of independent components."""
        return self.space.dimension

    @property
    def certificate(self) -> Certificate:
        """The number of independent components by two roads."""
        return self.space.certificate

    @cached_property
    def names(self) -> tuple[str, ...]:
        """Names of all components that the index symmetry leaves, in the order of preference."""
        return component_names(self.space, self.symbol)

    @property
    def independent_components(self) -> tuple[str, ...]:
        """Names of the independent components."""
        return tuple(self.names[number] for number in self.space.free)

    @cached_property
    def combinations(self) -> dict[str, Combination]:
        """Every allowed component as a combination of the independent ones, in matrix notation."""
        return matrix_relations(self.space, self.symbol, self.factors)

    @property
    def relations(self) -> dict[str, str]:
        """Every dependent component that need not vanish, as an expression of the independent ones."""
        free = set(self.independent_components)
        return {name: combination_text(terms) for name, terms in self.combinations.items() if name not in free}

    @property
    def zero(self) -> tuple[str, ...]:
        """Names of the components that must vanish."""
        return tuple(self.names[number] for number in self.space.zero)

    @property
    def axes_in_words(self) -> str:
        """The axes, in words."""
        return self.axes.words if self.axes else "standard axes of the class"

    @property
    def elements_in_words(self) -> str:
        """Where the symmetry elements lie in these axes."""
        return elements_in_words(self.group, self.space.turn, self._namer)

    @property
    def _namer(self) -> Callable[..., str] | None:
        """What names directions by the crystal's lattice, when there is a crystal."""
        if self.crystal is None:
            return None
        from tensorsym.crystal.directions import direction_namer

        return direction_namer(self.crystal)

    @cached_property
    def reasons(self) -> dict[str, tuple[str, ...]]:
        """The element that alone makes components vanish -> those components; ``all together`` for what is left."""
        if len(self.names) > MOST_EXPLAINED:
            return {}
        left = dict.fromkeys(self.space.zero)
        found: dict[str, tuple[str, ...]] = {}
        for element in self.group.elements:
            alone = replace(self.group, setting=f"{self.group.setting}>{element.words}", generators=(element,))
            space = _placed(invariant_space(alone, self.kind), self.space.turn)
            because = [number for number in left if number not in space.expressions]
            if because:
                found[element_in_words(element, self.space.turn, self._namer)] = tuple(
                    self.names[number] for number in because
                )
            for number in because:
                del left[number]
        if left:
            found["the elements together"] = tuple(self.names[number] for number in left)
        return found

    def entry(self, position: Sequence[int]) -> Combination:
        """Return one entry of the matrix (indices from 0) as a combination of independent ones; empty for zero."""
        components = self.space.components
        word = word_of(indices_of_entry(self.kind, position))
        number = components.of_word[word]
        terms = self.combinations.get(self.names[number], ()) if number >= 0 else ()
        return tuple((name, components.sign[word] * value) for name, value in terms)

    def basis(self) -> NDArray[np.float64]:
        """Return basis tensors, shape (independent, 3, ..., 3), Cartesian, in the stated axes.

        Tensor k has independent matrix entry k equal to 1, so the property is the sum of the independent components
        times the basis.
        """
        import numpy as np

        words = self.space.components.words
        scale = [matrix_factor(self.kind, self.factors, words[number]) for number in self.space.free]
        shape = (-1,) + (1,) * self.kind.rank
        return np.asarray(self.space.basis() / np.array(scale, dtype=float).reshape(shape))

    def sympy(self) -> Any:
        """Return the form as a sympy matrix (or array, beyond two indices of matrix notation) of symbols."""
        from tensorsym.tasks.symbols import symbolic_form

        return symbolic_form(self)


def allowed(
    target: Crystal | PointGroup | str,
    property: str | Property | None = None,
    *,
    law: str | None = None,
    equations: Sequence[str] = (),
    regime: str | None = None,
    axes: str | None = None,
) -> AllowedForm:
    """Return the form of a property that a crystal or a class allows.

    Parameters
    ----------
    target : Crystal, PointGroup or str
        A crystal that was read, or a point group or its symbol.
    property : str or Property, optional
        Name in the catalogue. Exactly one of `property` and `law` is given.
    law : str, optional
        A law such as ``P_i = d_ijk sigma_jk`` for a property outside the catalogue.
    equations, regime
        Further index equations and the regime of the law, see `tensorsym.tensors.law.parse_law`.
    axes : str, optional
        ``file`` (default for a crystal), ``standard``, ``ieee``, ``international`` or Miller text such as
        ``x=[110] z=(001)``.

    Raises
    ------
    UsageError
        If the question is incomplete or a name is unknown.

    Examples
    --------
    >>> form = allowed("32", "piezoelectric")
    >>> form.independent_components, form.relations["d26"]
    (('d11', 'd14'), '-2 d11')
    """
    row, parsed, factors = _what(property, law, equations, regime)
    if isinstance(target, str):
        target = point_group_named(target)
    if isinstance(target, PointGroup):
        group, crystal = target, None
        placed_axes, turn = _axes_of_group(group, axes)
    else:
        group, crystal = target.symmetry.group, target
        placed_axes, turn = _axes_of_crystal(target, axes)
    space = _placed(invariant_space(group, parsed.kind), turn)
    notes = _notes(row, parsed, crystal)
    return AllowedForm(parsed, factors, group, placed_axes, space, row, crystal, notes)


def _what(
    name: str | Property | None, law: str | None, equations: Sequence[str], regime: str | None
) -> tuple[Property | None, Law, tuple[int, ...]]:
    if (name is None) == (law is None):
        msg = "give either the name of a property or a law"
        raise UsageError(msg, hint="`tensorsym properties` lists the names; a law reads --law 'P_i = d_ijk sigma_jk'")
    if law is not None:
        parsed = parse_law(law, equations, regime)
        return None, parsed, parsed.factors
    row = name if isinstance(name, Property) else property_named(str(name))
    return row, row.parsed, row.factors


def _axes_of_group(group: PointGroup, axes: str | None) -> tuple[Axes | None, NDArray[np.float64] | None]:
    if axes in (None, "standard"):
        return None, None
    from tensorsym.crystal.axes import axes_for_group

    placed = axes_for_group(group, str(axes))
    return placed, placed.matrix


def _axes_of_crystal(crystal: Crystal, axes: str | None) -> tuple[Axes, NDArray[np.float64]]:
    from tensorsym.crystal.axes import axes_for

    placed = axes_for(crystal, axes or "file")
    return placed, placed.matrix @ crystal.symmetry.frame.T


def _placed(space: InvariantSpace, turn: Any) -> InvariantSpace:
    if turn is None:
        return space
    import numpy as np

    return space_in_axes(space, np.array(turn, dtype=float))


def _notes(row: Property | None, law: Law, crystal: Crystal | None) -> tuple[str, ...]:
    notes = []
    if crystal is not None and law.kind.time_odd:
        notes.append(
            "the file holds no magnetic order: the form is that of an order that keeps the whole class; "
            "without magnetic order time reversal makes every component zero"
        )
    if row is not None and row.site:
        notes.append("a property of one atomic site: the form holds for a site whose own group is this class")
    if crystal is not None:
        notes.extend(crystal.symmetry_warnings)
    return tuple(notes)
