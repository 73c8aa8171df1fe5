"""Options that several commands share."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, TypeVar

import click

if TYPE_CHECKING:
    from collections.abc import Callable

F = TypeVar("F", bound="Callable[..., Any]")

SYMPREC = click.option(
    "--symprec",
    type=click.FloatRange(min=0.0, min_open=True),
    default=1e-3,
    show_default=True,
    metavar="LENGTH",
    help="Distance in angstrom within which atoms count as equivalent.",
)

AXES = click.option(
    "--axes",
    metavar="AXES",
    help="Axes of the components: file (default), ieee, international, or Miller text such as 'x=[110] z=(001)'.",
)


def format_option(*choices: str) -> Callable[[F], F]:
    """Return the option ``--format``, the first choice being the default."""
    return click.option(
        "--format",
        "style",
        type=click.Choice(choices),
        default=choices[0],
        show_default=True,
        help="Form of the output.",
    )
