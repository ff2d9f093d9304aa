"""What the network equals: equations, determinants, H(s), numeric evaluation, roots."""
