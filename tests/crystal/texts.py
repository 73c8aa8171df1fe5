"""Wurtzite ZnO written in every format that we read. Parameters as printed in textbooks, layout our own."""

from __future__ import annotations

import json

A, C, U = 3.25, 5.207, 0.382
HEIGHT = A * 0.75**0.5
BOHR = 0.529177210903

PLACES = (
    ("Zn", (1 / 3, 2 / 3, 0.0)),
    ("Zn", (2 / 3, 1 / 3, 0.5)),
    ("O", (1 / 3, 2 / 3, U)),
    ("O", (2 / 3, 1 / 3, 0.5 + U)),
)
VECTORS = ((A, 0.0, 0.0), (-A / 2, HEIGHT, 0.0), (0.0, 0.0, C))


def cartesian(place):
    """Return a place in Å."""
    return tuple(sum(place[row] * VECTORS[row][column] for row in range(3)) for column in range(3))


def rows(items, form="{:.10f}"):
    """Return vectors, one a line."""
    return "\n".join(" ".join(form.format(value) for value in item) for item in items)


def scaled(vector, unit):
    """Return a vector in another unit."""
    return [value / unit for value in vector]


def numbered(form, items):
    """Return one line for each item, `form` filled with its number from 1 and its text."""
    return "\n".join(form.format(number=number, text=text) for number, text in enumerate(items, 1))


def labelled(form, unit=1.0):
    """Return one line for each atom, `form` filled with its number, label and coordinates."""
    return "\n".join(
        form.format(number=number, label=label, text=rows([scaled(cartesian(place), unit)]))
        for number, (label, place) in enumerate(PLACES, 1)
    )


CIF = f"""# wurtzite
data_ZnO
_chemical_name_common 'zinc oxide'
_cell_length_a {A}(1)
_cell_length_b {A}
_cell_length_c {C}
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 120
loop_
_space_group_symop_operation_xyz
x,y,z
-y,x-y,z
-x+y,-x,z
-x,-y,z+1/2
y,-x+y,z+1/2
x-y,x,z+1/2
-y,-x,z
-x+y,y,z
x,x-y,z
y,x,z+1/2
x-y,-y,z+1/2
-x,-x+y,z+1/2
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
Zn1 Zn2+ 0.3333 0.6667 0
O1 O2- 0.3333 0.6667 {U}
"""

POSCAR = f"""wurtzite
1.0
{rows(VECTORS)}
Zn O
2 2
Direct
{rows(place for _, place in PLACES)}
"""

VASPRUN = f"""<?xml version="1.0" encoding="ISO-8859-1"?>
<modeling>
 <atominfo>
  <array name="atoms"><set>
   {"".join(f"<rc><c>{label}</c><c>1</c></rc>" for label, _ in PLACES)}
  </set></array>
 </atominfo>
 <structure name="initialpos">
  <crystal><varray name="basis">
{"".join(f"<v>{rows([vector])}</v>" for vector in VECTORS)}
  </varray></crystal>
  <varray name="positions">
{"".join(f"<v>{rows([place])}</v>" for _, place in PLACES)}
  </varray>
 </structure>
</modeling>
"""

OUTCAR = f""" vasp.6.4.1 an invented run
   VRHFIN =Zn: d10
   VRHFIN =O: s2p4
   ions per type =               2   2

      direct lattice vectors                 reciprocal lattice vectors
{"".join(f"    {rows([vector], '{:.9f}')} 0.0 0.0 0.0{chr(10)}" for vector in VECTORS)}
 position of ions in fractional coordinates (direct lattice)
{rows((place for _, place in PLACES), "{:.8f}")}

"""

PW_INPUT = f"""&CONTROL
 calculation = 'scf' ! a comment
/
&SYSTEM
 ibrav = 4, A = {A}, C = {C}
 nat = 4, ntyp = 2,
/
ATOMIC_SPECIES
 Zn 65.38 Zn.upf
 O 16.00 O.upf
ATOMIC_POSITIONS crystal
{"".join(f"{label} {rows([place])}{chr(10)}" for label, place in PLACES)}
K_POINTS automatic
 4 4 4 0 0 0
"""

ALAT = A / BOHR
PW_OUTPUT = f"""
     Program PWSCF v.7.2 starts
     lattice parameter (alat)  =  {ALAT:.8f}  a.u.
     number of atoms/cell      =            4
     crystal axes: (cart. coord. in units of alat)
{numbered("       a({number}) = ( {text} )", [rows([scaled(vector, A)]) for vector in VECTORS])}
     Cartesian axes

     site n.     atom                  positions (alat units)
{labelled("   {number}  {label}  tau(   {number}) = ( {text} )", A)}
"""

PW_XML = f"""<?xml version="1.0" encoding="UTF-8"?>
<qes:espresso xmlns:qes="http://www.quantum-espresso.org/ns/qes/qes-1.0">
 <input><atomic_structure nat="4" alat="{ALAT}">
  <atomic_positions>
{labelled('<atom name="{label}" index="{number}">{text}</atom>', BOHR)}
  </atomic_positions>
  <cell>{numbered("<a{number}>{text}</a{number}>", [rows([scaled(vector, BOHR)]) for vector in VECTORS])}</cell>
 </atomic_structure></input>
</qes:espresso>
"""

XSF = f"""# wurtzite
CRYSTAL
PRIMVEC
{rows(VECTORS)}
PRIMCOORD
4 1
{"".join(f"{30 if label == 'Zn' else label} {rows([cartesian(place)])}{chr(10)}" for label, place in PLACES)}"""

XYZ = f"""4
Lattice="{" ".join(rows([vector]) for vector in VECTORS)}" Properties=id:I:1:species:S:1:pos:R:3 pbc="T T T"
{"".join(f"{number} {label} {rows([cartesian(place)])}{chr(10)}" for number, (label, place) in enumerate(PLACES))}"""

STRUCTURE = {
    "@module": "pymatgen.core.structure",
    "@class": "Structure",
    "lattice": {"matrix": VECTORS},
    "sites": [
        {"species": [{"element": label, "occu": 1}], "abc": place, "xyz": cartesian(place)} for label, place in PLACES
    ],
}

JSON = json.dumps({"formula": "ZnO", "structure": STRUCTURE})

AIMS = f"""# geometry.in
{"".join(f"lattice_vector {rows([vector])}{chr(10)}" for vector in VECTORS)}
{"".join(f"atom {rows([cartesian(place)])} {label}{chr(10)}" for label, place in PLACES)}"""

ALL = {
    "CIF": CIF,
    "POSCAR": POSCAR,
    "vasprun.xml": VASPRUN,
    "OUTCAR": OUTCAR,
    "pw.x input": PW_INPUT,
    "output of Quantum ESPRESSO": PW_OUTPUT,
    "XML of pw.x": PW_XML,
    "XSF": XSF,
    "extended XYZ": XYZ,
    "pymatgen JSON": JSON,
    "aims": AIMS,
}
