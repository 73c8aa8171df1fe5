"""The 32 crystal classes in the settings in use: the facts, one row each.

Source: International Tables for Crystallography, vol. A (2016), tables 2.1.3.1 (order of symmetry directions),
3.2.1.4 (symbols of the classes in both notations) and 2.1.3.3 (settings); the ranges of space-group numbers from
its table 3.2.3.2. Typed from memory, checked by orders, by the counts of operations and against spglib.

Elements are written ``symbol:direction``. Those before ``|`` generate the group, those behind it stand in the symbol
too. Directions: x y z, xy = [110], yx = [1-10] and xyz = [111] of the standard frame.
"""

from __future__ import annotations

from typing import NamedTuple


class ClassRow(NamedTuple):
    """One class in one setting."""

    setting: str
    """Symbol that also tells where the elements lie."""
    hermann_mauguin: str
    """Short symbol of the class."""
    schoenflies: str
    """Schoenflies symbol."""
    system: str
    """Crystal system."""
    elements: str
    """Symmetry elements of the symbol."""


CLASSES: tuple[ClassRow, ...] = tuple(
    ClassRow(*(part.strip() for part in line.split(";")))
    for line in """
    1; 1; C1; triclinic;
    -1; -1; Ci; triclinic; -1:o
    121; 2; C2; monoclinic; 2:y
    1m1; m; Cs; monoclinic; m:y
    12/m1; 2/m; C2h; monoclinic; 2:y m:y
    112; 2; C2; monoclinic; 2:z
    11m; m; Cs; monoclinic; m:z
    112/m; 2/m; C2h; monoclinic; 2:z m:z
    211; 2; C2; monoclinic; 2:x
    m11; m; Cs; monoclinic; m:x
    2/m11; 2/m; C2h; monoclinic; 2:x m:x
    222; 222; D2; orthorhombic; 2:x 2:y | 2:z
    mm2; mm2; C2v; orthorhombic; m:x m:y | 2:z
    2mm; mm2; C2v; orthorhombic; m:y m:z | 2:x
    m2m; mm2; C2v; orthorhombic; m:x m:z | 2:y
    mmm; mmm; D2h; orthorhombic; m:x m:y m:z
    4; 4; C4; tetragonal; 4:z
    -4; -4; S4; tetragonal; -4:z
    4/m; 4/m; C4h; tetragonal; 4:z m:z
    422; 422; D4; tetragonal; 4:z 2:x | 2:xy
    4mm; 4mm; C4v; tetragonal; 4:z m:x | m:xy
    -42m; -42m; D2d; tetragonal; -4:z 2:x | m:xy
    -4m2; -42m; D2d; tetragonal; -4:z m:x | 2:xy
    4/mmm; 4/mmm; D4h; tetragonal; 4:z m:z m:x | m:xy
    3; 3; C3; trigonal; 3:z
    -3; -3; C3i; trigonal; -3:z
    321; 32; D3; trigonal; 3:z 2:x
    312; 32; D3; trigonal; 3:z 2:y
    3m1; 3m; C3v; trigonal; 3:z m:x
    31m; 3m; C3v; trigonal; 3:z m:y
    -3m1; -3m; D3d; trigonal; -3:z m:x | 2:x
    -31m; -3m; D3d; trigonal; -3:z m:y | 2:y
    6; 6; C6; hexagonal; 6:z
    -6; -6; C3h; hexagonal; -6:z
    6/m; 6/m; C6h; hexagonal; 6:z m:z
    622; 622; D6; hexagonal; 6:z 2:x | 2:y
    6mm; 6mm; C6v; hexagonal; 6:z m:x | m:y
    -62m; -62m; D3h; hexagonal; -6:z 2:x | m:y
    -6m2; -62m; D3h; hexagonal; -6:z m:x | 2:y
    6/mmm; 6/mmm; D6h; hexagonal; 6:z m:z m:x | m:y
    23; 23; T; cubic; 2:z 3:xyz
    m-3; m-3; Th; cubic; m:z -3:xyz
    432; 432; O; cubic; 4:z 3:xyz | 2:xy
    -43m; -43m; Td; cubic; -4:z 3:xyz | m:xy
    m-3m; m-3m; Oh; cubic; 4:z m:z -3:xyz | m:xy
    """.strip().splitlines()
)
"""All rows; the first of each class is its standard setting."""

SAME_SETTING = {
    "2": "121", "m": "1m1", "2/m": "12/m1", "32": "321", "3m": "3m1", "-3m": "-3m1",
    "2/m2/m2/m": "mmm", "4/m2/m2/m": "4/mmm", "-32/m": "-3m1", "-32/m1": "-3m1", "-312/m": "-31m",
    "6/m2/m2/m": "6/mmm", "2/m-3": "m-3", "4/m-32/m": "m-3m", "m3": "m-3", "m3m": "m-3m",
    "12/m": "12/m1", "mm": "mm2", "1/m": "1m1", "-2": "1m1", "3/m": "-6", "-33m": "-43m",
    "s2": "-1", "c1h": "1m1", "v": "222", "vh": "mmm", "vd": "-42m", "s6": "-3", "s1": "1m1",
}  # fmt: skip
"""Other symbols in use (full, older and Schoenflies ones) and the setting that they mean."""

SPACE_GROUP_RANGES = (
    (1, "1"), (2, "-1"), (5, "121"), (9, "1m1"), (15, "12/m1"), (24, "222"), (46, "mm2"), (74, "mmm"), (80, "4"),
    (82, "-4"), (88, "4/m"), (98, "422"), (110, "4mm"), (114, "-42m"), (120, "-4m2"), (122, "-42m"), (142, "4/mmm"),
    (146, "3"), (148, "-3"), (149, "312"), (150, "321"), (151, "312"), (152, "321"), (153, "312"), (155, "321"),
    (156, "3m1"), (157, "31m"), (158, "3m1"), (159, "31m"), (161, "3m1"), (163, "-31m"), (167, "-3m1"), (173, "6"),
    (174, "-6"), (176, "6/m"), (182, "622"), (186, "6mm"), (188, "-6m2"), (190, "-62m"), (194, "6/mmm"), (199, "23"),
    (206, "m-3"), (214, "432"), (220, "-43m"), (230, "m-3m"),
)  # fmt: skip
"""Last space-group number of each run of numbers and the setting of its class."""
