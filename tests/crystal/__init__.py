"""Tests of the room that reads crystals and finds their symmetry."""
