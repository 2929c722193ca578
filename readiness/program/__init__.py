"""A program folder becomes items: bytes in, typed items or located problems out."""
