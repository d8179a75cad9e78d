"""Tests of whole beams."""
