"""Plants on disk and shipped tables."""
