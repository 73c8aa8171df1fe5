"""Index words: the components of a kind, which of them are the same number, and what they are called.

A word is the integer whose ternary digits, first index first, are the indices 0, 1, 2.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from itertools import product
from typing import TYPE_CHECKING

from tensorsym.exact.orbits import Move, phased_orbits

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from tensorsym.tensors.kind import TensorKind

PAIR_DIGIT = ((1, 6, 5), (6, 2, 4), (5, 4, 3))
"""Matrix digit of an index pair in the order 11 22 33 23 13 12 (IEEE Std 176-1987, table 1)."""


@dataclass(frozen=True, slots=True)
class Components:
    """The independent components that a kind has in a crystal without symmetry, in the order of preference.

    Components with all indices equal come first, then the rest in the order of their digits: an elimination that
    keeps the earliest columns then keeps the components a handbook would name.
    """

    words: tuple[int, ...]
    """Word that stands for each component: the one with the smallest digits."""
    digits: tuple[str, ...]
    """Name of each component without its symbol, such as ``14``."""
    of_word: tuple[int, ...]
    """Component of every word, -1 where the index symmetry makes it vanish."""
    sign: tuple[int, ...]
    """``T[word] = sign[word] * component``."""
    multiplicity: tuple[int, ...]
    """Number of words that each component fills."""


def indices_of(word: int, rank: int, base: int = 3) -> tuple[int, ...]:
    """Return the indices 0, 1, 2 of a word (0 and 1 of a word with base 2).

    >>> indices_of(5, 3)
    (0, 1, 2)
    """
    indices = [0] * rank
    for place in range(rank - 1, -1, -1):
        word, indices[place] = divmod(word, base)
    return tuple(indices)


def word_of(indices: Iterable[int]) -> int:
    """Return the word with these indices.

    >>> word_of((0, 1, 2))
    5
    """
    word = 0
    for index in indices:
        word = 3 * word + index
    return word


def digits_of(indices: Sequence[int], pairs: Sequence[int]) -> tuple[int, ...]:
    """Return the digits of a component: a pair gives one digit 1 to 6, any other index one digit 1 to 3.

    >>> digits_of((0, 1, 2), pairs=(1,))
    (1, 4)
    """
    digits = []
    place = 0
    while place < len(indices):
        if place in pairs:
            digits.append(PAIR_DIGIT[indices[place]][indices[place + 1]])
            place += 2
        else:
            digits.append(indices[place] + 1)
            place += 1
    return tuple(digits)


@lru_cache(maxsize=512)
def components_of(kind: TensorKind) -> Components:
    """Return the components of a kind.

    Examples
    --------
    >>> from tensorsym.tensors.kind import TensorKind
    >>> components_of(TensorKind(2, permutations=(((1, 0), 1),))).digits
    ('11', '22', '33', '12', '13', '23')
    """
    rank = kind.rank
    if not kind.permutations:
        return _all_words(rank)
    size = 3**rank
    spelled = [indices_of(word, rank) for word in range(size)]
    orbits = phased_orbits(size, [_index_move(*generator, spelled) for generator in kind.permutations], 2)
    digits = [digits_of(indices, kind.pairs) for indices in spelled]
    best: dict[int, int] = {}
    for word, orbit in enumerate(orbits.orbit):
        if orbit >= 0 and (orbit not in best or (digits[word], word) < (digits[best[orbit]], best[orbit])):
            best[orbit] = word
    order = sorted(best, key=lambda orbit: (len(set(spelled[best[orbit]])) > 1, digits[best[orbit]], best[orbit]))
    place = {orbit: number for number, orbit in enumerate(order)}
    multiplicity = [0] * len(order)
    for orbit in orbits.orbit:
        if orbit >= 0:
            multiplicity[place[orbit]] += 1
    return Components(
        words=tuple(best[orbit] for orbit in order),
        digits=tuple("".join(map(str, digits[best[orbit]])) for orbit in order),
        of_word=tuple(place.get(orbit, -1) for orbit in orbits.orbit),
        sign=tuple(
            0 if orbit < 0 else 1 - 2 * (orbits.phase[word] ^ orbits.phase[best[orbit]])
            for word, orbit in enumerate(orbits.orbit)
        ),
        multiplicity=tuple(multiplicity),
    )


def _all_words(rank: int) -> Components:
    """Return the components of a kind without index symmetry: every word, those with all indices equal first."""
    size = 3**rank
    equal = sorted({0, (size - 1) // 2, size - 1})
    order = [*equal, *(word for word in range(size) if word not in equal)]
    texts = ["".join(digits) for digits in product("123", repeat=rank)]
    of_word = [0] * size
    for number, word in enumerate(order):
        of_word[word] = number
    return Components(
        words=tuple(order),
        digits=tuple(texts[word] for word in order),
        of_word=tuple(of_word),
        sign=(1,) * size,
        multiplicity=(1,) * size,
    )


def _index_move(permutation: tuple[int, ...], sign: int, spelled: list[tuple[int, ...]]) -> Move:
    images = [word_of([indices[place] for place in permutation]) for indices in spelled]
    return Move(images, [(1 - sign) // 2] * len(spelled))
