"""Plain text tables and paragraphs that fit a terminal of 80 columns."""

from __future__ import annotations

import textwrap
from itertools import product
from typing import TYPE_CHECKING

from tensorsym.tensors.notation import VOIGT_ORDER

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Sequence

    from tensorsym.tensors.kind import TensorKind

WIDTH = 80
"""Columns of a screen."""

_HARD_BLANK = "\N{NO-BREAK SPACE}"

LARGEST_GRID = 6**3
"""A matrix with more entries than this is told by its components alone."""


def paragraph(head: str, words: Iterable[str], separator: str = ", ") -> str:
    """Return a wrapped paragraph: a head, then words, following lines indented.

    >>> paragraph("zero:", ["d11", "d12"])
    'zero: d11, d12'
    """
    indent = " " * (len(head) - len(head.lstrip()) + 4)
    items = list(words)
    if len(items) > 1:
        # Keep each item whole: its blanks are made unbreakable while the lines are filled.
        items = [item.replace(" ", _HARD_BLANK) if len(item) < WIDTH // 2 else item for item in items]
    text = f"{head} {separator.join(items)}"
    filled = textwrap.fill(text, WIDTH, subsequent_indent=indent, break_long_words=False, break_on_hyphens=False)
    return filled.replace(_HARD_BLANK, " ")


def matrix_grids(kind: TensorKind, shape: Sequence[int], entry: Callable[[tuple[int, ...]], str]) -> list[str]:
    """Return the matrix of a kind as text, one grid for each value of the leading indices beyond two.

    Parameters
    ----------
    kind : TensorKind
        Says which indices are pairs, for the labels.
    shape : sequence of int
        Shape in matrix notation.
    entry : callable
        Gives the text of an entry from its position.
    """
    if not shape:
        return [f"    {entry(())}"]
    labels = axis_labels(kind)
    grids = []
    for lead in product(*(range(size) for size in shape[:-2])):
        title = "  ".join(f"{labels[axis][index]}" for axis, index in enumerate(lead))
        rows = shape[-2] if len(shape) > 1 else 1
        cells = [
            [entry((*lead, *((row,) if len(shape) > 1 else ()), column)) for column in range(shape[-1])]
            for row in range(rows)
        ]
        side = labels[len(shape) - 2] if len(shape) > 1 else ("",)
        grids.append(_grid(cells, side, labels[len(shape) - 1], f"first {title}" if lead else ""))
    return grids


def axis_labels(kind: TensorKind) -> list[tuple[str, ...]]:
    """Return the labels along every axis of the matrix: pairs in the handbook's order, or 1 2 3."""
    pairs = tuple(VOIGT_ORDER.split())
    return [
        pairs if place in kind.pairs else ("1", "2", "3") for place in range(kind.rank) if place - 1 not in kind.pairs
    ]


def _grid(cells: list[list[str]], side: Sequence[str], top: Sequence[str], title: str) -> str:
    """Return one grid; columns are as wide as what stands in them, so that six fit the screen."""
    widths = [max(5, *(len(row[column]) for row in cells)) + 2 for column in range(len(top))]
    edge = max(len(label) for label in side) + 4
    lines = [f"    {title}"] if title else []
    lines.append(" " * edge + "".join(label.rjust(width) for label, width in zip(top, widths, strict=True)))
    for label, row in zip(side, cells, strict=True):
        lines.append(label.rjust(edge) + "".join(cell.rjust(width) for cell, width in zip(row, widths, strict=True)))
    return "\n".join(line.rstrip() for line in lines)
