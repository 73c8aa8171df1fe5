"""Point groups as exact operations, with their names and where their elements lie."""
