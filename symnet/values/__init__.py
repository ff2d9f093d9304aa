"""Which parts: values that can be bought, values that make a network do what is wanted."""
