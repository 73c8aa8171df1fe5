from __future__ import annotations

import pytest

from tests.house import tree
from tests.house.source import ROOT

CLONE = "/srv/clone of tensorsym"


def test_top_level_is_tidy():
    """The top level holds the agreed names and dot-files only."""
    assert tree.strangers_at_the_top(tree.files_of_the_tree()) == []


def test_tree_has_no_banned_words():
    """No file says where the idea came from."""
    assert tree.banned_words(tree.texts_of_the_tree(tree.files_of_the_tree())) == []


def test_tree_has_no_machine_paths():
    """No text of ours holds an absolute path of somebody's machine."""
    assert tree.machine_paths(tree.texts_of_the_tree(tree.files_of_the_tree()), str(ROOT)) == []


def test_tree_is_really_read():
    """The files read include the package, the tests and this file's own text."""
    texts = tree.texts_of_the_tree(tree.files_of_the_tree())

    assert {"pyproject.toml", "tensorsym/errors.py", "tests/house/test_tree.py"} <= set(texts)
    assert "this file's own text" in texts["tests/house/test_tree.py"]


def test_stranger_at_the_top_is_found():
    """A folder or file that is not agreed is named once; dot-files are welcome."""
    names = ["docs/a.md", "docs/b.md", "setup.py", ".gitignore", ".ci/run", "README.md", "tests/docs/c.md"]

    assert tree.strangers_at_the_top(names) == ["docs", "setup.py"]


@pytest.mark.parametrize("word", tree.BANNED_WORDS)
@pytest.mark.parametrize("text", ["see the {}", "{}s", "ts_{}_2"])
def test_banned_word_is_found(word, text):
    """A banned word is found in either case, in a plural and inside a name."""
    found = tree.banned_words({"a.md": f"first\n{text.format(word)}", "b.md": text.format(word.title())})

    assert [place.partition(":")[0] for place in found] == ["a.md, line 2", "b.md, line 1"]


@pytest.mark.parametrize("folder", tree.MACHINE_FOLDERS)
@pytest.mark.parametrize("text", ['open("{}")', "{}", "cd {} && ls"])
def test_machine_path_is_found(folder, text):
    """An absolute path into a folder of a machine is found wherever it stands in a line."""
    path = f"/{folder}/somebody"

    assert tree.machine_paths({"README.md": text.format(path)}, CLONE) == [
        f"README.md, line 1: {text.format(path)}",
    ]


def test_path_of_the_clone_is_found():
    """The place of the clone itself is found too."""
    assert len(tree.machine_paths({"tests/test_a.py": f"'{CLONE}/tensorsym'"}, CLONE)) == 1


@pytest.mark.parametrize(
    ("name", "text"),
    [
        ("README.md", "python -m venv .venv && .venv/bin/tensorsym structures/quartz-p3121.cif"),
        ("README.md", "#!/usr/bin/env bash"),
        ("README.md", f"https://example.org/{'home'}/page and tests/{'work'}/a.py"),
        ("tests/outputs/OUTCAR", f" executed in /{'home'}/author/run"),
    ],
)
def test_harmless_path_passes(name, text):
    """Relative paths, addresses and the paths inside foreign data get no complaint."""
    assert tree.machine_paths({name: text}, CLONE) == []
