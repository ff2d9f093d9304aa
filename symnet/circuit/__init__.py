"""What was drawn: parts, the network as a value, its text form, and the faults of its wiring."""
