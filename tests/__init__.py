"""Tests of tensorsym: one folder a room, and `house` for the rules of the source itself."""
