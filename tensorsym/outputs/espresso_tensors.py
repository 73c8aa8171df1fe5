"""The tensors in ``tensors.xml``, which ph.x of Quantum ESPRESSO keeps beside its dynamical matrices.

Arrays are written as Fortran holds them, first index fastest (memory; the charges at hand are symmetric).
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from tensorsym.crystal.formats_vasprun import xml_elements
from tensorsym.errors import OutputFileError
from tensorsym.outputs.espresso_phonon import ATOMIC_RAMAN, FROM_FORCES, FROM_POLARISATION
from tensorsym.outputs.record import OutputFile, TensorRecord
from tensorsym.outputs.rows import CUT_OFF, Lines, Table

if TYPE_CHECKING:
    from xml.etree.ElementTree import Element

    from tensorsym.outputs.content import Content

FORMAT = "tensors.xml of Quantum ESPRESSO"


def looks_like_espresso_tensors(head: str) -> bool:
    """Tell the file by its first element."""
    return "<EF_TENSORS>" in head[:2000]


def read_espresso_tensors(content: Content) -> OutputFile:
    """Return the tensors of a tensors.xml; it holds no structure.

    Raises
    ------
    InputError
        If the XML is broken, or a number is missing or not finite.
    """
    records: list[TensorRecord] = []
    raman: list[Table] = []
    for element in xml_elements(content.text, content.source):
        if element.tag == "DIELECTRIC_CONSTANT":
            dielectric = _numbers(element, content.source).values.reshape(3, 3)
            records.append(TensorRecord("dielectric", "electronic", dielectric, "1", contribution="electronic"))
        elif element.tag == "EFFECTIVE_CHARGES_EU":
            values = _numbers(element, content.source).values.reshape(-1, 3, 3).transpose(0, 2, 1)
            records.append(TensorRecord("born-charge", FROM_FORCES, values, "e", per_site=True))
        elif element.tag == "EFFECTIVE_CHARGES_UE":
            values = _numbers(element, content.source).values.reshape(3, -1, 3).transpose(1, 0, 2)
            records.append(TensorRecord("born-charge", FROM_POLARISATION, values, "e", per_site=True))
        elif element.tag == "RAMAN_TNS":
            raman.append(_numbers(element, content.source, 27))
    if raman:
        values = np.array([table.values.reshape(3, 3, 3) for table in raman])
        records.append(TensorRecord("raman-atomic", ATOMIC_RAMAN, values, "bohr^-1", per_site=True))
    return OutputFile(None, tuple(records), FORMAT)


def _numbers(element: Element, source: str, count: int = 0) -> Table:
    """Return the numbers of an element as one column; there are `count` of them, or a multiple of 9."""
    words = (element.text or "").split()
    size = len(words)
    if not size or size % 9 or (count and size != count):
        msg = f"{element.tag} holds {size} numbers"
        raise OutputFileError(msg, where=source, expected=str(count or "9 an atom"), hint=CUT_OFF)
    return Lines(words, f"{source}, {element.tag}").table(size, 1, "its numbers", most_skipped=0)
