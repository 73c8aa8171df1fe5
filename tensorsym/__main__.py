"""Run the command line as ``python -m tensorsym``."""

from __future__ import annotations

from tensorsym.cli.main import main

main()
