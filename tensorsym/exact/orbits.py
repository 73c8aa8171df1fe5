"""Orbits of words under moves that carry phases: the whole of invariant theory for monomial groups.

A move sends word ``w`` to ``images[w]`` and multiplies by ``exp(2 pi i phases[w] / modulus)``. A function that
all moves leave alone is fixed by its value at one word of an orbit, and exists when no closed walk in the orbit
gathers a phase.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence


@dataclass(frozen=True, slots=True)
class Move:
    """A permutation of words with a phase on each."""

    images: Sequence[int]
    """Image of every word, a permutation of ``range(size)``."""
    phases: Sequence[int]
    """Phase gathered from every word, in units of a full turn divided by the modulus."""


@dataclass(frozen=True, slots=True)
class PhasedOrbits:
    """Orbits of ``range(size)``; phases are counted from the orbit's first word."""

    orbit: tuple[int, ...]
    """Number of the orbit of every word; -1 where a gathered phase forces the value to vanish."""
    phase: tuple[int, ...]
    """Phase of every word against the first word of its orbit."""
    first: tuple[int, ...]
    """Smallest word of every surviving orbit."""


def phased_orbits(size: int, moves: Sequence[Move], modulus: int) -> PhasedOrbits:
    """Return the orbits of ``range(size)`` that carry an invariant function.

    Parameters
    ----------
    size : int
        Number of words.
    moves : sequence of Move
        Generators; their inverses need not be given, since every move is a permutation of a finite set.
    modulus : int
        Phases are integers modulo this number.

    Examples
    --------
    >>> swap = Move(images=[1, 0, 2], phases=[0, 0, 1])
    >>> phased_orbits(3, [swap], 2).orbit
    (0, 0, -1)
    """
    label = [-1] * size
    phase = [0] * size
    alive: list[bool] = []
    for start in range(size):
        if label[start] < 0:
            alive.append(_spread(start, len(alive), moves, modulus, label, phase))
    number = {old: new for new, old in enumerate(old for old, lives in enumerate(alive) if lives)}
    orbit = tuple(number.get(old, -1) for old in label)
    first: dict[int, int] = {}
    for word, which in enumerate(orbit):
        if which >= 0:
            first.setdefault(which, word)
    return PhasedOrbits(orbit, tuple(phase), tuple(first[which] for which in range(len(number))))


def _spread(start: int, name: int, moves: Sequence[Move], modulus: int, label: list[int], phase: list[int]) -> bool:
    """Label everything reachable from `start`; return False when a closed walk gathers a phase."""
    label[start] = name
    consistent = True
    waiting = [start]
    while waiting:
        word = waiting.pop()
        here = phase[word]
        for move in moves:
            image = move.images[word]
            there = (here + move.phases[word]) % modulus
            if label[image] < 0:
                label[image] = name
                phase[image] = there
                waiting.append(image)
            elif phase[image] != there:
                consistent = False
    return consistent
