"""Tests of the documents that results are written into."""
