"""The derivation as a person writes it: node equations, an order of elimination, every line an equation."""
