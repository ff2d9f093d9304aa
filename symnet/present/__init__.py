"""What one sees: the brief, and how results show themselves."""
