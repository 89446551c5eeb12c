"""What the engineer drew: frozen data, no Qt, no numpy, no files."""
