"""The click group: one small module a command, loaded when it is called."""

from __future__ import annotations

from importlib import import_module

import click

from tensorsym.cli.overview import COMMANDS, first_screen
from tensorsym.errors import nearest_names


class Commands(click.Group):
    """Commands whose modules are imported only when they run."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Return the names in the order of a day's work."""
        del ctx
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Return a command, or fail with the nearest names."""
        if cmd_name not in COMMANDS:
            nearest = nearest_names(cmd_name, COMMANDS)
            hint = f"nearest: {', '.join(nearest)}" if nearest else f"known: {', '.join(COMMANDS)}"
            ctx.fail(f"{cmd_name!r} is no command; {hint}")
        found = import_module(f"tensorsym.cli.{cmd_name}").command
        assert isinstance(found, click.Command)  # noqa: S101  the table names modules of this room
        return found

    def get_help(self, ctx: click.Context) -> str:
        """Return the first screen."""
        del ctx
        return first_screen()


def _print_version(ctx: click.Context, _: click.Parameter, wanted: bool) -> None:  # noqa: FBT001  click calls it so
    if wanted:
        from importlib.metadata import version

        click.echo(f"tensorsym {version('tensorsym')}")
        ctx.exit()


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.option("--version", is_flag=True, is_eager=True, expose_value=False, callback=_print_version)
def commands() -> None:
    """Tensor properties of the real crystal."""
