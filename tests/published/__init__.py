"""Tests against published figures, one module a source."""
