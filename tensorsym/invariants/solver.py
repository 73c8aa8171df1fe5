"""The exact solver: (point group, kind) -> the space of allowed tensors.

In letters that the group permutes up to phases an invariant is an orbit of words whose phases are consistent. In a
rectangular basis the orbits are the answer. In the hexagonal basis the words are written in x + iy, x - iy and z; their
real and imaginary parts have integer Cartesian components, and an elimination over the rationals picks the components
that a handbook would call independent. No square root of 3 appears and no tolerance is used.
"""

from __future__ import annotations

from functools import lru_cache
from itertools import combinations, product
from operator import mul
from typing import TYPE_CHECKING

from tensorsym.exact.orbits import phased_orbits
from tensorsym.exact.rows import null_space, reduced_rows
from tensorsym.groups.operations import Basis
from tensorsym.invariants.characters import invariant_count
from tensorsym.invariants.letters import MODULUS, index_moves, operation_move, plane_move
from tensorsym.invariants.space import Block, Certificate, InvariantSpace
from tensorsym.tensors.words import components_of, indices_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from tensorsym.exact.orbits import PhasedOrbits
    from tensorsym.groups.point_group import PointGroup
    from tensorsym.tensors.kind import TensorKind

Vector = dict[int, int]
"""Sparse integer vector: component number -> entry."""


@lru_cache(maxsize=4096)
def invariant_space(group: PointGroup, kind: TensorKind) -> InvariantSpace:
    """Return all tensors of a kind that a point group leaves alone, exactly.

    Parameters
    ----------
    group : PointGroup
        The group, in its setting of the standard frame.
    kind : TensorKind
        Rank, parity, time behaviour and index symmetry.

    Returns
    -------
    InvariantSpace
        The free components and all others as rational combinations of them, with the count by characters.

    Examples
    --------
    >>> from tensorsym.groups.symbols import point_group_named
    >>> from tensorsym.tensors.law import parse_law
    >>> invariant_space(point_group_named("32"), parse_law("P_i = d_ijk sigma_jk").kind)
    InvariantSpace(321, rank 3, dimension 2: 11 14)
    """
    blocks = _signed_blocks(group, kind) if group.basis is Basis.CARTESIAN else _hexagonal_blocks(group, kind)
    if kind.traceless:
        blocks = _without_trace(blocks, kind)
    dimension = sum(len(block.free) for block in blocks)
    return InvariantSpace(group, kind, blocks, Certificate(dimension, invariant_count(group, kind)))


def _signed_blocks(group: PointGroup, kind: TensorKind) -> tuple[Block, ...]:
    """One block an orbit: its components are equal up to sign."""
    orbits = _orbits(group, kind)
    entries: list[Vector] = [{} for _ in orbits.first]
    for number, word in enumerate(components_of(kind).words):
        if orbits.orbit[word] >= 0:
            entries[orbits.orbit[word]][number] = 1 - 2 * orbits.phase[word]
    blocks = []
    for entry in entries:
        numbers = tuple(entry)
        sign = entry[numbers[0]]
        blocks.append(Block(numbers, numbers[:1], (tuple(sign * value for value in entry.values()),)))
    return tuple(blocks)


def _hexagonal_blocks(group: PointGroup, kind: TensorKind) -> tuple[Block, ...]:
    """Eliminate in blocks; without index symmetry only once for all words with the same number of z."""
    if not kind.permutations:
        return tuple(copy for plane in range(kind.rank + 1) for copy in _plane_blocks(group, kind, plane))
    spelled = [indices_of(word, kind.rank) for word in components_of(kind).words]
    return eliminated_blocks(_real_vectors(_orbits(group, kind), spelled, base=3))


def _orbits(group: PointGroup, kind: TensorKind) -> PhasedOrbits:
    moves = [*index_moves(kind, group.basis), *(operation_move(generator, kind) for generator in group.generators)]
    return phased_orbits(3**kind.rank, moves, MODULUS[group.basis])


def _plane_blocks(group: PointGroup, kind: TensorKind, plane: int) -> list[Block]:
    """Solve for words of `plane` letters x, y, and copy the answer to every choice of places for the z between."""
    moves = [plane_move(generator, kind, plane) for generator in group.generators]
    orbits = phased_orbits(2**plane, moves, MODULUS[group.basis])
    heads = list(product((0, 1), repeat=plane))
    if plane == kind.rank:
        heads.sort(key=lambda head: len(set(head)) > 1)
    blocks = eliminated_blocks(_real_vectors(orbits, heads, base=2))
    return [copy for block in blocks for copy in _copies(block, heads, kind)]


def _copies(block: Block, heads: Sequence[Sequence[int]], kind: TensorKind) -> list[Block]:
    """Return the block with its letters x, y at every choice of places; the order of preference stays the same."""
    of_word, rank = components_of(kind).of_word, kind.rank
    members = [heads[number] for number in block.components]
    free = [block.components.index(number) for number in block.free]
    copies = []
    for places in combinations(range(rank), len(members[0])):
        weights = [3 ** (rank - 1 - place) for place in places]
        ground = 3**rank - 1 - 2 * sum(weights)
        numbers = tuple(of_word[ground + sum(map(mul, weights, head))] for head in members)
        copies.append(Block(numbers, tuple(numbers[place] for place in free), block.rows, block.denominator))
    return copies


def _real_vectors(orbits: PhasedOrbits, spelled: Sequence[Sequence[int]], base: int) -> list[Vector]:
    """Return real and imaginary parts of the orbits of letter words, as integer Cartesian components.

    The letter word with minus at the places M holds the component with y at the places Y with the factor ``i**|Y|``
    times -1 for every place in both. So a component with an even number of y belongs to the real part, one with an
    odd number to the imaginary part. `spelled` holds the indices of each component; words have `base` letters.
    """
    if not spelled:  # antisymmetry in more than three indices leaves no component
        return []
    survivors = _survivors(orbits, len(spelled[0]), base)
    vectors: dict[tuple[int, int], Vector] = {}
    for number, indices in enumerate(spelled):
        z_places, y_places = _places(indices)
        turns = y_places.bit_count()
        overall = -1 if turns % 4 >= 2 else 1
        sums: dict[int, int] = {}
        for minus_places, which, sign in survivors.get(z_places, ()):
            negative = (y_places & minus_places).bit_count() % 2
            sums[which] = sums.get(which, 0) + (-sign if negative else sign)
        for which, total in sums.items():
            if total:
                vectors.setdefault((which, turns % 2), {})[number] = overall * total
    return list(vectors.values())


def _survivors(orbits: PhasedOrbits, rank: int, base: int) -> dict[int, list[tuple[int, int, int]]]:
    """Return the words of the surviving orbits as (places of minus, orbit, sign), by their places of z.

    Of an orbit and its complex conjugate, which give the same real tensors, one is kept.
    """
    found: dict[int, list[tuple[int, int, int]]] = {}
    kept = [which <= orbits.orbit[_conjugate(word, rank, base)] for which, word in enumerate(orbits.first)]
    for word, which in enumerate(orbits.orbit):
        if which >= 0 and kept[which]:
            z_places, minus_places = _places(indices_of(word, rank, base))
            found.setdefault(z_places, []).append((minus_places, which, 1 - 2 * (orbits.phase[word] // 3)))
    return found


def _places(indices: Sequence[int]) -> tuple[int, int]:
    """Return the places of index 2 and of index 1, each as the bits of a number."""
    twos = ones = 0
    for index in indices:
        twos, ones = 2 * twos + (index == 2), 2 * ones + (index == 1)
    return twos, ones


def _conjugate(word: int, rank: int, base: int) -> int:
    """Return the word with its first two letters exchanged."""
    conjugate = 0
    for index in indices_of(word, rank, base):
        conjugate = base * conjugate + (1, 0, 2)[index]
    return conjugate


def eliminated_blocks(vectors: Sequence[Vector]) -> tuple[Block, ...]:
    """Return the blocks that sparse integer vectors span, with the earliest components free."""
    blocks = []
    for members in _connected(vectors):
        numbers = sorted({number for member in members for number in vectors[member]})
        if len(members) == 1:
            lead = vectors[members[0]][numbers[0]]
            row = tuple(vectors[members[0]][number] * (1 if lead > 0 else -1) for number in numbers)
            blocks.append(Block(tuple(numbers), (numbers[0],), (row,), abs(lead)))
            continue
        matrix = [[vectors[member].get(number, 0) for number in numbers] for member in members]
        reduced = reduced_rows(matrix)
        free = tuple(numbers[pivot] for pivot in reduced.pivots)
        blocks.append(Block(tuple(numbers), free, reduced.rows, reduced.denominator))
    return tuple(blocks)


def _connected(vectors: Sequence[Vector]) -> list[list[int]]:
    """Return the vectors in sets that share no component."""
    holders: dict[int, list[int]] = {}
    for member, vector in enumerate(vectors):
        for number in vector:
            holders.setdefault(number, []).append(member)
    seen: set[int] = set()
    sets = []
    for start in range(len(vectors)):
        if start in seen:
            continue
        seen.add(start)
        reached = [start]
        for member in reached:
            for number in vectors[member]:
                for other in holders.pop(number, ()):
                    if other not in seen:
                        seen.add(other)
                        reached.append(other)
        sets.append(reached)
    return sets


def _without_trace(blocks: tuple[Block, ...], kind: TensorKind) -> tuple[Block, ...]:
    """Keep the combinations whose trace ``T_11 + T_22 + T_33`` vanishes."""
    vectors = [dict(zip(block.components, map(int, row), strict=True)) for block in blocks for row in block.rows]
    diagonal = [number for number, word in enumerate(components_of(kind).words) if word in (0, 4, 8)]
    traces = [sum(vector.get(number, 0) for number in diagonal) for vector in vectors]
    kept = []
    for combination in null_space([traces], len(vectors)):
        sums: Vector = {}
        for weight, vector in zip(combination, vectors, strict=True):
            for number, entry in vector.items():
                sums[number] = sums.get(number, 0) + weight * entry
        kept.append({number: entry for number, entry in sums.items() if entry})
    return eliminated_blocks(kept)
