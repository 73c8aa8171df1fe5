"""Symbols of the elements by atomic number, for formats that give numbers."""

from __future__ import annotations

from tensorsym.errors import StructureError

_SYMBOLS = (
    "H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo "
    "Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl "
    "Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og"
).split()


def element_named(text: str, where: str) -> str:
    """Return a symbol as it is, or the symbol of an atomic number.

    >>> element_named("14", ""), element_named("Si", "")
    ('Si', 'Si')
    """
    if not text.isdigit():
        return text
    if not 1 <= int(text) <= len(_SYMBOLS):
        msg = f"{text} is no atomic number"
        raise StructureError(msg, where=where)
    return _SYMBOLS[int(text) - 1]
