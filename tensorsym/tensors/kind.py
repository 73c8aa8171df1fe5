"""What a tensor is before any crystal: rank, parity, time behaviour and index symmetry."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from itertools import pairwise

from tensorsym.errors import UsageError

MAX_RANK = 10
"""Largest rank accepted: 3**10 index words still fit in memory without effort."""

LARGEST_INDEX_GROUP = 50_000
"""Most permutations of an index symmetry: all 8! of rank 8 are fine, 9! would take seconds and much memory."""

SignedPermutation = tuple[tuple[int, ...], int]
"""``(p, s)`` says ``T[i_p0, i_p1, ...] = s T[i_0, i_1, ...]`` with s = 1 or -1."""


@dataclass(frozen=True, slots=True)
class TensorKind:
    """A space of tensors in three dimensions, named by how its members behave.

    Raises
    ------
    UsageError
        If the rank is out of range, a permutation does not fit the rank, or the index equations force every
        component to vanish.

    Examples
    --------
    >>> elastic = TensorKind(4, permutations=(((1, 0, 2, 3), 1), ((2, 3, 0, 1), 1)))
    >>> elastic.pairs
    (0, 2)
    >>> len(elastic.index_group)
    8
    """

    rank: int
    """Number of indices."""
    axial: bool = False
    """True for a pseudotensor: it keeps the sign ``-(-1)**rank`` under inversion."""
    time_odd: bool = False
    """True when time reversal changes the sign."""
    permutations: tuple[SignedPermutation, ...] = ()
    """Generators of the index symmetry."""
    traceless: bool = False
    """True for a symmetric rank 2 tensor whose trace vanishes (a field gradient)."""

    def __post_init__(self) -> None:
        if not 0 <= self.rank <= MAX_RANK:
            msg = f"rank {self.rank} is out of range"
            raise UsageError(msg, expected=f"a rank from 0 to {MAX_RANK}")
        for permutation, sign in self.permutations:
            if sorted(permutation) != list(range(self.rank)) or sign not in (1, -1):
                msg = f"({permutation}, {sign}) is no signed permutation of {self.rank} indices"
                raise UsageError(msg)
        exchangeable = ((1, 0), 1) in self.index_group  # here a contradiction of the index equations comes out
        if self.traceless and not exchangeable:
            msg = "only a symmetric tensor of rank 2 can be declared traceless"
            raise UsageError(msg)

    @property
    def index_group(self) -> tuple[SignedPermutation, ...]:
        """Every signed permutation that the generators imply, the identity first."""
        return _index_group(self.rank, self.permutations)

    @property
    def pairs(self) -> tuple[int, ...]:
        """First positions of the index pairs that matrix notation writes as one digit from 1 to 6.

        A pair is two neighbouring indices symmetric with each other and with no third one. Tensors of rank 2 are
        written with both indices.
        """
        return _pairs(self.rank, self.permutations)


@lru_cache(maxsize=4096)
def _index_group(rank: int, generators: tuple[SignedPermutation, ...]) -> tuple[SignedPermutation, ...]:
    identity = tuple(range(rank))
    signs = {identity: 1}
    waiting = [identity]
    while waiting:
        known = waiting.pop()
        for permutation, sign in generators:
            product = tuple(known[place] for place in permutation)
            if product not in signs:
                signs[product] = signs[known] * sign
                waiting.append(product)
                if len(signs) > LARGEST_INDEX_GROUP:
                    msg = f"the index symmetry of rank {rank} has more than {LARGEST_INDEX_GROUP} permutations"
                    raise UsageError(msg, hint="ask for a lower rank or fewer equal factors")
            elif signs[product] != signs[known] * sign:
                msg = "the index equations contradict one another, so that every component vanishes"
                raise UsageError(msg, hint="check their signs")
    return tuple(signs.items())


@lru_cache(maxsize=4096)
def _pairs(rank: int, generators: tuple[SignedPermutation, ...]) -> tuple[int, ...]:
    if rank <= 2:
        return ()
    group = set(_index_group(rank, generators))
    partners: dict[int, list[int]] = {place: [] for place in range(rank)}
    for low in range(rank):
        for high in range(low + 1, rank):
            swap = list(range(rank))
            swap[low], swap[high] = high, low
            if (tuple(swap), 1) in group:
                partners[low].append(high)
                partners[high].append(low)
    return tuple(low for low, high in pairwise(range(rank)) if partners[low] == [high] and partners[high] == [low])
