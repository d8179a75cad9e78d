"""Tests of the catalogues."""
