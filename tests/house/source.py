"""Our source as the rules see it: modules, their rooms, and every import with the moment at which it happens."""

from __future__ import annotations

import ast
import sys
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from collections.abc import Iterator

ROOT = Path(__file__).resolve().parents[2]
PACKAGE = "tensorsym"

Moment = Literal["module", "function", "typing"]


@dataclass(frozen=True)
class Import:
    """One imported module."""

    target: str
    """Dotted name; of `from a import b` it is `a.b`, whether `b` is a module or a name in `a`."""
    line: int
    """Line of the statement."""
    moment: Moment
    """When it happens: with the module, inside a function, or for the type checker only."""

    @property
    def package(self) -> str:
        """Return the first part of the dotted name."""
        return self.target.partition(".")[0]

    @property
    def room(self) -> str:
        """Return the room of ours that is imported, empty for the facade itself."""
        return self.target.split(".")[1] if "." in self.target else ""


@dataclass(frozen=True)
class Module:
    """One module of the package."""

    name: str
    """Dotted name, `tensorsym.groups.symbols`; a package has the name of its folder."""
    source: str
    """Its text."""
    is_package: bool = False
    """True for an `__init__`."""

    @property
    def room(self) -> str:
        """Return `groups` of `tensorsym.groups.symbols`, and an empty text for the facade and `__main__`."""
        room = [*self.name.split("."), ""][1]
        return "" if room == "__main__" else room

    @cached_property
    def tree(self) -> ast.Module:
        """Return the syntax tree."""
        return ast.parse(self.source)

    @cached_property
    def imports(self) -> tuple[Import, ...]:
        """Return all imports, also those by `import_module` with a fixed name."""
        return tuple(self._imports_under(self.tree, "module"))

    @property
    def foreign_imports(self) -> list[Import]:
        """Return the imports that are neither ours nor the standard library's."""
        return [found for found in self.imports if found.package not in {PACKAGE, *sys.stdlib_module_names}]

    @property
    def own_imports(self) -> list[Import]:
        """Return the imports of our own modules."""
        return [found for found in self.imports if found.package == PACKAGE]

    def _imports_under(self, node: ast.AST, moment: Moment) -> Iterator[Import]:
        for child in ast.iter_child_nodes(node):
            for target in self._targets(child):
                yield Import(target, child.lineno, moment)
            if isinstance(child, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda):
                yield from self._imports_under(child, "function")
            elif isinstance(child, ast.If) and _is_for_types(child.test):
                yield from self._imports_under(ast.Module(child.body, []), "typing")
                yield from self._imports_under(ast.Module(child.orelse, []), moment)
            else:
                yield from self._imports_under(child, moment)

    def _targets(self, node: ast.AST) -> list[str]:
        if isinstance(node, ast.Import):
            return [alias.name for alias in node.names]
        if isinstance(node, ast.ImportFrom):
            return [f"{self._origin(node)}.{alias.name}" for alias in node.names]
        if isinstance(node, ast.Call) and _called(node) in {"import_module", "__import__"} and node.args:
            name = node.args[0]
            return [name.value] if isinstance(name, ast.Constant) and isinstance(name.value, str) else []
        return []

    def _origin(self, node: ast.ImportFrom) -> str:
        """Return the module after `from`, relative ones counted from here."""
        if not node.level:
            return node.module or ""
        here = self.name.split(".")
        folder = here[: len(here) - node.level + self.is_package]
        return ".".join([*folder, *([node.module] if node.module else [])])


def modules_of_the_package() -> list[Module]:
    """Return every module of the package as it stands in the clone."""
    return [_module_at(path) for path in sorted((ROOT / PACKAGE).rglob("*.py"))]


def _module_at(path: Path) -> Module:
    parts = path.relative_to(ROOT).with_suffix("").parts
    is_package = parts[-1] == "__init__"
    return Module(".".join(parts[:-1] if is_package else parts), path.read_text(encoding="utf-8"), is_package)


def _is_for_types(test: ast.expr) -> bool:
    return (isinstance(test, ast.Name) and test.id == "TYPE_CHECKING") or (
        isinstance(test, ast.Attribute) and test.attr == "TYPE_CHECKING"
    )


def _called(node: ast.Call) -> str:
    return node.func.attr if isinstance(node.func, ast.Attribute) else getattr(node.func, "id", "")
