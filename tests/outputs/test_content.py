from __future__ import annotations

import bz2
import gzip
import lzma

import pytest

from tensorsym.errors import OutputFileError
from tensorsym.outputs import content as content_module
from tensorsym.outputs.content import Content

TEXT = b"first\nsecond\r\n\nfourth"


def written(folder, data):
    """Write bytes where a reader can find them."""
    path = folder / "file"
    path.write_bytes(data)
    return path


@pytest.mark.parametrize("pack", [bytes, gzip.compress, bz2.compress, lzma.compress], ids=["plain", "gz", "bz2", "xz"])
def test_packed_or_not(tmp_path, pack):
    """Head, lines and text are those of what was packed, whatever the name."""
    content = Content(written(tmp_path, pack(TEXT)))

    assert content.head.startswith("first\n")
    assert list(content.lines()) == ["first", "second", "", "fourth"]
    assert content.text == "first\nsecond\n\nfourth"
    assert not content.is_binary


@pytest.mark.parametrize(
    ("data", "says"),
    [(b"", "is empty"), (b" \n\t", "is empty"), (gzip.compress(b"", mtime=0), "is empty")],
)
def test_empty_file(tmp_path, data, says):
    """A file of nothing is refused at once."""
    with pytest.raises(OutputFileError, match=says):
        Content(written(tmp_path, data))


def test_missing_file_and_folder(tmp_path):
    """A path that leads nowhere or to a folder is told."""
    with pytest.raises(OutputFileError, match="no such file"):
        Content(tmp_path / "missing")
    with pytest.raises(OutputFileError, match="is a folder"):
        Content(tmp_path)


@pytest.mark.parametrize(
    ("pack", "share"), [(gzip.compress, 0.5), (bz2.compress, 0.5), (lzma.compress, 0.5), (gzip.compress, 0.999)]
)
def test_cut_compression(tmp_path, pack, share):
    """A packed file that was cut off is refused when the cut is reached."""
    data = pack(bytes(str(list(range(40_000))), "ascii").replace(b",", b"\n"))
    path = written(tmp_path, data[: int(share * len(data))])

    with pytest.raises(OutputFileError, match=r"cannot be (decompressed|read)"):
        list(Content(path).lines())


def test_binary_data(tmp_path):
    """A binary file has no head; as text, or behind lines of text, it is refused."""
    content = Content(written(tmp_path, b"\x00\x01" * 100))
    later = Content(written(tmp_path / "..", b"text\n" * 20_000 + b"\x00\n"))

    assert content.is_binary
    assert content.head == ""
    with pytest.raises(OutputFileError, match="binary"):
        assert content.text
    with pytest.raises(OutputFileError, match="line 20001: binary data"):
        list(later.lines())


def test_limits(tmp_path, monkeypatch):
    """A line too long, a text too large for memory and an endless file are refused."""
    content = Content(written(tmp_path, b"x" * 2000 + b"\n"))
    monkeypatch.setattr(content_module, "LONGEST_LINE", 1000)
    with pytest.raises(OutputFileError, match=r"line 1: .*too long"):
        list(content.lines())
    monkeypatch.setattr(content_module, "LARGEST_WHOLE", 1000)
    with pytest.raises(OutputFileError, match="larger than"):
        assert content.data
    monkeypatch.setattr(content_module, "LARGEST_READ", 100)
    with pytest.raises(OutputFileError, match=r"line 21: .*too long"):
        list(Content(written(tmp_path, b"abcd\n" * 100)).lines())
