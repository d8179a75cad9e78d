"""Tests of the search, the job file and the results."""
