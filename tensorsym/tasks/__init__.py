"""One module a verb: what the program can be asked to do, with the result beside it."""
