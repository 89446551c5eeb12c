"""Results for readers: tables, documents, plots."""
