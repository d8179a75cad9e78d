"""Tests of the engine, module by module."""
