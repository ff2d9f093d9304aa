"""Is it right: a hand derivation, line by line, held against the exact solution of the network."""
