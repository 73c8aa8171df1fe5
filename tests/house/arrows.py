"""Rules of who may import whom: each takes modules and returns its complaints, one line each."""

from __future__ import annotations

from dataclasses import dataclass
from graphlib import CycleError, TopologicalSorter
from typing import TYPE_CHECKING

from tests.house.source import PACKAGE

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from tests.house.source import Import, Module

FLOORS = {
    "exact": 0,
    "groups": 0,
    "tensors": 0,
    "invariants": 1,
    "catalog": 1,
    "crystal": 2,
    "outputs": 2,
    "tasks": 3,
    "report": 4,
    "cli": 5,
    "page": 5,
}
"""Floor of each room; imports go to a lower floor, to the room itself, or along `SIDEWAYS`."""

SIDEWAYS = {("groups", "exact"), ("tensors", "exact"), ("outputs", "crystal")}
"""Arrows allowed between rooms of one floor."""

OPEN_TO_ALL = "errors"

ROOMS = frozenset(FLOORS)


@dataclass(frozen=True)
class Home:
    """Where a foreign package may be imported."""

    rooms: frozenset[str]
    """Rooms in which it may be imported at all."""
    with_module: frozenset[str] = frozenset()
    """Those in which it may come with the module; elsewhere only inside functions, or for the type checker."""


HOMES = {
    "ase": Home(frozenset({"crystal", "outputs"})),
    "click": Home(frozenset({"cli"}), frozenset({"cli"})),
    "flint": Home(frozenset({"exact"}), frozenset({"exact"})),
    "h5py": Home(frozenset({"outputs"})),
    "matplotlib": Home(frozenset({"report"})),
    "numpy": Home(ROOMS, frozenset({"crystal", "outputs", "tasks"})),
    "pint": Home(frozenset({"catalog", "outputs", "tasks"})),
    "plotly": Home(frozenset({"report"})),
    "pymatgen": Home(frozenset({"crystal", "outputs"}), frozenset({"crystal", "outputs"})),
    "scipy": Home(frozenset({"outputs", "tasks"})),
    "spglib": Home(frozenset({"crystal", "outputs"}), frozenset({"crystal", "outputs"})),
    "sympy": Home(frozenset({"report", "tasks"})),
}
"""Home of every foreign package; one that is not listed has none."""


def upward_arrows(modules: Iterable[Module]) -> list[str]:
    """Return the imports between rooms that do not go down, those inside functions and for types included."""
    return [
        _complaint(module, found, f"{module.room} may not import {found.room}")
        for module in modules
        for found in module.own_imports
        if module.room and found.room and not _goes_down(module.room, found.room)
    ]


def rooms_without_floor(modules: Iterable[Module]) -> list[str]:
    """Return the modules in a room that the floors do not know."""
    return [
        f"{module.name}: {module.room} is no room" for module in modules if module.room not in ROOMS | {"", OPEN_TO_ALL}
    ]


def facade_imports(modules: Iterable[Module]) -> list[str]:
    """Return the imports of `tensorsym` itself inside a room, `from tensorsym import ...` included."""
    return [
        _complaint(module, found, f"import the room's module, not {PACKAGE} itself")
        for module in modules
        for found in module.own_imports
        if module.room and (found.room not in ROOMS | {OPEN_TO_ALL} or _is_facade_name(found))
    ]


def import_cycles(modules: Sequence[Module]) -> list[str]:
    """Return a ring of modules that import each other when they are loaded, if there is one."""
    names = {module.name for module in modules}
    arrows = {
        module.name: {_loaded_name(found.target, names) for found in module.own_imports if found.moment == "module"}
        - {module.name}
        for module in modules
    }
    try:
        TopologicalSorter(arrows).prepare()
    except CycleError as ring:
        return [" <- ".join(ring.args[1])]
    return []


def packages_outside_home(modules: Iterable[Module]) -> list[str]:
    """Return the imports of foreign packages in rooms that are not theirs, or at a moment that is not."""
    complaints = []
    for module in modules:
        for found in module.foreign_imports:
            home = HOMES.get(found.package)
            if home is None:
                complaints.append(_complaint(module, found, f"{found.package} has no home"))
            elif module.room not in home.rooms:
                complaints.append(_complaint(module, found, f"{found.package} belongs in {sorted(home.rooms)}"))
            elif found.moment == "module" and module.room not in home.with_module:
                complaints.append(
                    _complaint(module, found, f"import {found.package} inside the function that needs it")
                )
    return complaints


def _goes_down(room: str, imported: str) -> bool:
    if imported in {room, OPEN_TO_ALL} or (room, imported) in SIDEWAYS:
        return True
    return room in FLOORS and FLOORS.get(imported, len(FLOORS)) < FLOORS[room]


def _is_facade_name(found: Import) -> bool:
    """Tell `from tensorsym import read`, or a bare room, from `import tensorsym.groups.symbols`."""
    return found.target.count(".") == 1 and found.room != OPEN_TO_ALL


def _loaded_name(target: str, names: set[str]) -> str:
    """Return the module that an import of `a.b` loads: `a.b` if it is one, else `a`."""
    return target if target in names else target.rpartition(".")[0]


def _complaint(module: Module, found: Import, why: str) -> str:
    return f"{module.name}, line {found.line}, imports {found.target}: {why}"
