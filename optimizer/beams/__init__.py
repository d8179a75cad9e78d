"""Whole beams: from spans and loads to bars with lengths, and again after a change."""
