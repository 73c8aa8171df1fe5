"""``tensorsym symmetry``."""

from __future__ import annotations

import json

import click

from tensorsym.cli.options import SYMPREC, format_option


@click.command("symmetry")
@click.argument("file")
@SYMPREC
@format_option("text", "json")
def command(file: str, symprec: float, style: str) -> None:
    """Space group, class, sites, axes and the ladder of tolerances of the structure in FILE.

    \b
    tensorsym symmetry structures/quartz-p3121.cif
    """
    from tensorsym.crystal.read import read
    from tensorsym.report.symmetry_screen import symmetry_document, symmetry_text

    crystal = read(file, symprec=symprec)
    click.echo(json.dumps(symmetry_document(crystal), indent=1) if style == "json" else symmetry_text(crystal))
