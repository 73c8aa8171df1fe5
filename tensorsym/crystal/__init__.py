"""From a structure file to lattice, sites, symmetry and axes."""
