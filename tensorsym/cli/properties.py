"""``tensorsym properties``."""

from __future__ import annotations

import json

import click

from tensorsym.cli.options import format_option


@click.command("properties")
@click.argument("word", required=False)
@format_option("text", "json")
def command(word: str | None, style: str) -> None:
    """List the named properties, or those whose name, title, alias or law holds WORD.

    \b
    tensorsym properties magneto
    """
    from tensorsym.catalog.properties import all_properties, properties_matching
    from tensorsym.report.properties_list import properties_document, properties_text

    rows = properties_matching(word) if word else all_properties()
    click.echo(json.dumps(properties_document(rows), indent=1) if style == "json" else properties_text(rows))
