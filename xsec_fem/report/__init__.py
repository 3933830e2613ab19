"""Pictures, tables and pages: they see results only."""
