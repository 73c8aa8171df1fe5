"""``tensorsym check``."""

from __future__ import annotations

import json
import sys
from typing import TYPE_CHECKING, Any

import click

from tensorsym.cli.options import SYMPREC, format_option
from tensorsym.errors import UsageError

if TYPE_CHECKING:
    from tensorsym.tasks.check_file import CheckReport


@click.command("check")
@click.argument("files", nargs=-1, required=True, metavar="FILE [TENSORFILE]")
@click.option(
    "--fail-on",
    type=click.Choice(["inconsistent", "unstable", "any"]),
    default="inconsistent",
    show_default=True,
    help="What gives exit code 1: broken symmetry, a broken demand of physics, or either.",
)
@click.option("--reader", metavar="NAME", help="Reader of the output, in place of the one its content asks for.")
@click.option("--each", is_flag=True, help="Every FILE is an output of its own; one line for each.")
@click.option("--property", "property_name", metavar="NAME", help="Property of a bare matrix; check only this one.")
@click.option("--order", metavar="PAIRS", help="Order of index pairs of a bare matrix, such as 'xx yy zz xy yz zx'.")
@click.option("--axes", metavar="AXES", help="Axes of the numbers: file, ieee, international, or 'x=[110] z=(001)'.")
@click.option("--unit", metavar="UNIT", help="Unit of a bare matrix.")
@click.option("--sigma", type=click.FloatRange(min=0.0, min_open=True), metavar="NUMBER", help="Standard deviation.")
@click.option(
    "--tolerance", type=click.FloatRange(min=0.0, min_open=True), metavar="NUMBER", help="Relative residual to accept."
)
@click.option(
    "--write", "target", type=click.Path(dir_okay=False), metavar="PATH", help="Save symmetrised tensors here."
)
@click.option("--accept", type=click.IntRange(min=1), metavar="N", help="Apply explanation N before symmetrising.")
@click.option("--force", is_flag=True, help="Let --write replace a file.")
@SYMPREC
@format_option("text", "json")
def command(
    files: tuple[str, ...],
    fail_on: str,
    reader: str | None,
    each: bool,  # noqa: FBT001  click passes options by name
    property_name: str | None,
    order: str | None,
    axes: str | None,
    unit: str | None,
    sigma: float | None,
    tolerance: float | None,
    target: str | None,
    accept: int | None,
    force: bool,  # noqa: FBT001  click passes options by name
    symprec: float,
    style: str,
) -> None:
    """Hold the tensors in FILE, or in TENSORFILE for the structure FILE, against the crystal's symmetry.

    FILE alone is an output of a calculation with structure and tensors. TENSORFILE is a tensor file in JSON, or a bare
    matrix of numbers with --property and --order.

    \b
    tensorsym check OUTCAR
    tensorsym check POSCAR d.txt --property piezoelectric --order "xx yy zz xy yz zx"
    tensorsym check --each runs/*/OUTCAR
    """
    options: dict[str, Any] = {
        "property": property_name,
        "order": order,
        "axes": axes,
        "unit": unit,
        "sigma": sigma,
        "tolerance": tolerance,
        "symprec": symprec,
        "reader": reader,
    }
    if each:
        _refuse(target is not None or accept is not None, "--each does not go with --write or --accept")
        sys.exit(_check_each(files, options, style, fail_on))
    _refuse(len(files) > 2, "more than two files", "a structure and a tensor file, or --each")
    _refuse(accept is not None and not target, "--accept needs --write PATH")
    from tensorsym.tasks.check_file import check_file

    report = check_file(*files, **options)
    if target:
        from tensorsym.tasks.mend import write_symmetrised

        write_symmetrised(report, target, accept=accept, force=force)
    _show(report, style)
    sys.exit(int(report.fails(fail_on)))


def _show(report: CheckReport, style: str) -> None:
    if style == "json":
        from tensorsym.report.check_json import check_document

        click.echo(json.dumps(check_document(report), indent=1))
    else:
        from tensorsym.report.check_text import check_text

        click.echo(check_text(report))


def _check_each(files: tuple[str, ...], options: dict[str, Any], style: str, fail_on: str) -> int:
    """Check files one by one and return the highest exit code of them."""
    from tensorsym.report.check_json import checks_document
    from tensorsym.report.check_text import summary_line
    from tensorsym.tasks.check_many import check_each

    done = []
    for checked in check_each(files, **options):
        done.append(checked)
        if style == "text":
            click.echo(summary_line(checked))
    if style == "json":
        click.echo(json.dumps(checks_document(done), indent=1))
    return max(checked.exit_code(fail_on) for checked in done)


def _refuse(wrong: bool, message: str, expected: str | None = None) -> None:  # noqa: FBT001  a condition
    if wrong:
        raise UsageError(message, expected=expected)
