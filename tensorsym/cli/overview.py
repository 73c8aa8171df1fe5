"""The commands and the first screen, in plain words that need no library to print."""

from __future__ import annotations

COMMANDS = {
    "allowed": "Which components of a property a crystal or a class allows.",
    "check": "Hold computed or measured tensors against a crystal's symmetry.",
    "symmetry": "Groups, sites, axes and the ladder of tolerances of a structure.",
    "properties": "List the named properties, or those that match a word.",
}
"""Name and one line of every command; the module of the same name in this room holds ``command``."""


def first_screen() -> str:
    """Return what ``tensorsym --help`` prints."""
    width = max(map(len, COMMANDS))
    commands = "\n".join(f"  {name.ljust(width)}  {line}" for name, line in COMMANDS.items())
    return f"""Tensor properties of the real crystal: what symmetry allows, and numbers held to it.

Use: tensorsym COMMAND ...        tensorsym COMMAND --help tells more

{commands}

For example
  tensorsym allowed 3m piezoelectric
  tensorsym allowed structures/quartz-p3121.cif elastic-stiffness --axes ieee
  tensorsym check OUTCAR

Exit codes: 0 consistent or done, 1 inconsistent with the symmetry, 2 wrong usage,
3 input that cannot be read. --version prints the version."""
