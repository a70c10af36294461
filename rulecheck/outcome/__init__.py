"""Frozen results without behaviour: what studies give and what output shows. No terms, no readers, no files."""
