"""Exact linear algebra over the rationals: no files, no floats."""
