"""Rules of the whole tree: what lies at its top, and words and paths that must not be in it."""

from __future__ import annotations

import re
import subprocess
from typing import TYPE_CHECKING

from tests.house.source import ROOT

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping
    from pathlib import Path

TOP_LEVEL = frozenset({"DEVELOPERS.md", "README.md", "pyproject.toml", "structures", "tensorsym", "tests"})

# The words and paths are put together here so that this file does not contain them.
BANNED_WORDS = tuple(
    "".join(halves) for halves in (("tran", "script"), ("lec", "ture"), ("you", "tube"), ("sub", "scribe"))
)
_WORDS = re.compile(rf"(?<![a-z])(?:{'|'.join(BANNED_WORDS)})", re.IGNORECASE)
MACHINE_FOLDERS = ("farm", "home", "mnt", "root", "tmp", "Users", "work")
_PATHS = re.compile(rf"(?<![\w.}})~/-])/(?:{'|'.join(MACHINE_FOLDERS)})/\w")


def files_of_the_tree() -> list[str]:
    """Return the files that are committed or could be, relative to the root."""
    command = ["git", "ls-files", "-z", "--cached", "--others", "--exclude-standard"]
    listed = subprocess.run(command, cwd=ROOT, check=True, capture_output=True, text=True).stdout
    return [name for name in listed.split("\0") if name and (ROOT / name).is_file()]


def texts_of_the_tree(names: Iterable[str]) -> dict[str, str]:
    """Return the texts by name; files that are not UTF-8 are left out."""
    texts = {name: _text(ROOT / name) for name in names}
    return {name: text for name, text in texts.items() if text is not None}


def strangers_at_the_top(names: Iterable[str]) -> list[str]:
    """Return what lies at the top level and has no place there."""
    tops = {name.partition("/")[0] for name in names}
    return sorted(top for top in tops if top not in TOP_LEVEL and not top.startswith("."))


def banned_words(texts: Mapping[str, str]) -> list[str]:
    """Return the places of words that would cite where the idea came from."""
    return _places(_WORDS, texts)


def machine_paths(texts: Mapping[str, str], here: str) -> list[str]:
    """Return the places of absolute paths of somebody's machine, those of this clone included."""
    ours = {name: text for name, text in texts.items() if _is_written_by_us(name)}
    return _places(_PATHS, ours) + _places(re.compile(re.escape(here) + r"\b"), ours)


def _is_written_by_us(name: str) -> bool:
    """Tell our own text from data under the tests, which may print the paths of those who made them."""
    return not name.startswith("tests/") or name.endswith((".py", ".md"))


def _places(pattern: re.Pattern[str], texts: Mapping[str, str]) -> list[str]:
    return [
        f"{name}, line {number}: {line.strip()[:100]}"
        for name, text in texts.items()
        for number, line in enumerate(text.splitlines(), start=1)
        if pattern.search(line)
    ]


def _text(path: Path) -> str | None:
    try:
        return path.read_text(encoding="utf-8")
    except UnicodeDecodeError:
        return None
