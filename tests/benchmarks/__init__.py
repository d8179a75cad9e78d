"""Benchmarks, run on request; see DEVELOPERS.md."""
