"""Symbols of the elements by atomic number."""

from __future__ import annotations

from tensorsym.errors import StructureError

SYMBOLS = tuple(
    """
    H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo
    Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl
    Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og
    """.split()  # noqa: SIM905  one page of literals otherwise
)
"""In the order of their atomic numbers."""

_KNOWN = frozenset({*SYMBOLS, "D", "T"})


def is_element(text: str) -> bool:
    """Tell the symbol of an element, of deuterium or of tritium, written as usual.

    >>> is_element("Si"), is_element("SI"), is_element("D")
    (True, False, True)
    """
    return text in _KNOWN


def element_named(text: str, where: str) -> str:
    """Return a symbol as it is, or the symbol of an atomic number.

    Raises
    ------
    StructureError
        If the number is none of an element.

    Examples
    --------
    >>> element_named("14", ""), element_named("Si", "")
    ('Si', 'Si')
    """
    if not text.isdigit():
        return text
    if not 1 <= int(text) <= len(SYMBOLS):
        msg = f"{text} is no atomic number"
        raise StructureError(msg, where=where, expected=f"1 to {len(SYMBOLS)}")
    return SYMBOLS[int(text) - 1]
