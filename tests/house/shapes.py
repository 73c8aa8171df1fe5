"""Rules of size and name: each takes modules and returns its complaints, one line each."""

from __future__ import annotations

import ast
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from tests.house.source import Module

MODULE_LINES = 400
FUNCTION_LINES = 50

EMPTY_MODULE_NAMES = frozenset({"common", "helper", "helpers", "misc", "util", "utils"})
EMPTY_PREFIXES = ("get_", "handle_", "process_")
FOREIGN_HOOKS = frozenset({"get_command", "get_help"})
"""Methods that click calls by this name when a group of commands loads lazily."""

Function = ast.FunctionDef | ast.AsyncFunctionDef


def long_modules(modules: Iterable[Module]) -> list[str]:
    """Return the modules over the cap: one idea a module."""
    lengths = {module.name: len(module.source.splitlines()) for module in modules}
    return [f"{name}: {lines} lines, cap {MODULE_LINES}" for name, lines in lengths.items() if lines > MODULE_LINES]


def long_functions(modules: Iterable[Module]) -> list[str]:
    """Return the functions whose body without the docstring is over the cap."""
    return [
        f"{module.name}.{function.name}: {body_lines(function)} lines, cap {FUNCTION_LINES}"
        for module in modules
        for function in _functions(module)
        if body_lines(function) > FUNCTION_LINES
    ]


def empty_names(modules: Iterable[Module]) -> list[str]:
    """Return the modules and functions whose names do not say what is in them or returned."""
    complaints = []
    for module in modules:
        if module.name.rpartition(".")[2] in EMPTY_MODULE_NAMES:
            complaints.append(f"{module.name}: name the one idea in it")
        complaints += [
            f"{module.name}.{function.name}: name what is returned"
            for function in _functions(module)
            if function.name.lstrip("_").startswith(EMPTY_PREFIXES) and function.name not in FOREIGN_HOOKS
        ]
    return complaints


def body_lines(function: Function) -> int:
    """Return the number of lines from the first statement after the docstring to the last."""
    body = function.body
    has_docstring = ast.get_docstring(function, clean=False) is not None
    if has_docstring and len(body) == 1:
        return 0
    return (function.end_lineno or 0) - body[has_docstring].lineno + 1


def _functions(module: Module) -> Iterator[Function]:
    return (node for node in ast.walk(module.tree) if isinstance(node, Function))
