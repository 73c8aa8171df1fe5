"""Where the command line starts and ends: the first screen at once, everything else through click."""

from __future__ import annotations

import os
import sys
from typing import NoReturn

from tensorsym.cli.overview import first_screen

INTERNAL = 70
"""Exit code of a failure that is our own fault."""


def main() -> NoReturn:
    """Run the command line and exit; every failure is one line on standard error."""
    if sys.argv[1:] in ([], ["--help"], ["-h"]):
        sys.stdout.write(first_screen() + "\n")
        sys.exit(0)
    from click import ClickException
    from click.exceptions import Abort

    from tensorsym.cli.commands import commands
    from tensorsym.errors import TensorsymError

    try:
        code = commands.main(args=_arguments(), prog_name="tensorsym", standalone_mode=False)
    except TensorsymError as error:
        _fail(str(error), error.exit_code)
    except ClickException as error:
        _fail(error.format_message(), error.exit_code)
    except Abort:
        _fail("interrupted", 130)
    except BrokenPipeError:
        # The reader of our output has gone: point stdout elsewhere so that the final flush is silent.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        sys.exit(0)
    except Exception as error:  # the last line of defence: no traceback reaches a user
        if os.environ.get("TENSORSYM_TRACEBACK"):
            raise
        told = f"{type(error).__name__}: {error}"
        _fail(f"internal error, please report it: {told} (TENSORSYM_TRACEBACK=1 shows more)", INTERNAL)
    sys.exit(code if isinstance(code, int) else 0)


def _arguments() -> list[str]:
    """Return the arguments, group symbols such as -43m protected from being taken for options.

    No option begins with a digit, so a hyphen before a digit is a bar: it becomes a minus sign, which symbols may have.
    """
    return ["\N{MINUS SIGN}" + word[1:] if word[:1] == "-" and word[1:2].isdigit() else word for word in sys.argv[1:]]


def _fail(line: str, code: int) -> NoReturn:
    sys.stderr.write(f"tensorsym: {' '.join(line.split())}\n")
    sys.exit(code)
