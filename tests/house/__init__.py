"""Tests that read our own source and hold the rules of the house."""
