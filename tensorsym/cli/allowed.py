"""``tensorsym allowed``."""

from __future__ import annotations

import json

import click

from tensorsym.cli.options import AXES, SYMPREC, format_option
from tensorsym.cli.targets import target_named


@click.command("allowed")
@click.argument("target")
@click.argument("property_name", metavar="[PROPERTY]", required=False)
@click.option("--law", help="A law in place of PROPERTY, such as 'P_i = d_ijk sigma_jk'.")
@click.option(
    "--equal", "equations", multiple=True, metavar="EQUATION", help="Index equation, such as 'd_ijk = d_ikj'."
)
@click.option("--regime", metavar="REGIME", help="equilibrium, transport, optical or local, for --law.")
@AXES
@SYMPREC
@format_option("text", "json", "latex")
def command(
    target: str,
    property_name: str | None,
    law: str | None,
    equations: tuple[str, ...],
    regime: str | None,
    axes: str | None,
    symprec: float,
    style: str,
) -> None:
    """Which components of PROPERTY the crystal or class TARGET allows.

    TARGET is a structure file, or a group symbol (3m, D3, -4m2, a space-group number).

    \b
    tensorsym allowed structures/quartz-p3121.cif piezoelectric
    tensorsym allowed 3m --law "P_i = chi_ijk E_j E_k"
    """
    from tensorsym.tasks.allowed import allowed

    form = allowed(target_named(target, symprec), property_name, law=law, equations=equations, regime=regime, axes=axes)
    if style == "json":
        from tensorsym.report.allowed_json import allowed_document

        click.echo(json.dumps(allowed_document(form), indent=1))
    elif style == "latex":
        from tensorsym.report.allowed_latex import allowed_latex

        click.echo(allowed_latex(form))
    else:
        from tensorsym.report.allowed_text import allowed_text

        click.echo(allowed_text(form))
