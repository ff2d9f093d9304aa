"""What H(s) looks like: normal form, sections, families, recognition."""
