"""Results as text, JSON documents and tables: pure functions, nothing is computed or written here."""
