"""What a network is between its terminals: two-port parameters, impedances, one part seen by all the others."""
