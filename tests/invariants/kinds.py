"""The kinds that the tests of this room run over."""

from __future__ import annotations

from tensorsym.tensors.kind import TensorKind

SYMMETRIC = (((1, 0), 1),)
LAST_TWO = (((0, 2, 1), 1),)
BOTH_PAIRS = (((1, 0, 2, 3), 1), ((0, 1, 3, 2), 1))
EXCHANGED = (((1, 0, 2, 3), 1), ((2, 3, 0, 1), 1))

KINDS = {
    "scalar": TensorKind(0),
    "pseudoscalar": TensorKind(0, axial=True),
    "vector": TensorKind(1),
    "magnetisation": TensorKind(1, axial=True, time_odd=True),
    "rank2": TensorKind(2),
    "symmetric": TensorKind(2, permutations=SYMMETRIC),
    "antisymmetric": TensorKind(2, permutations=(((1, 0), -1),)),
    "gyration": TensorKind(2, axial=True, permutations=SYMMETRIC),
    "magnetoelectric": TensorKind(2, axial=True, time_odd=True),
    "rank3": TensorKind(3),
    "piezoelectric": TensorKind(3, permutations=LAST_TWO),
    "piezomagnetic": TensorKind(3, axial=True, time_odd=True, permutations=LAST_TWO),
    "hall": TensorKind(3, axial=True, permutations=(((1, 0, 2), -1),)),
    "total3": TensorKind(3, permutations=(((1, 0, 2), 1), ((0, 2, 1), 1))),
    "cyclic": TensorKind(3, permutations=(((1, 2, 0), 1),)),
    "elastic": TensorKind(4, permutations=EXCHANGED),
    "photoelastic": TensorKind(4, permutations=BOTH_PAIRS),
    "flexoelectric": TensorKind(4, permutations=(((0, 1, 3, 2), 1),)),
    "rank4": TensorKind(4),
}
SMALL = {name: kind for name, kind in KINDS.items() if kind.rank <= 3}
