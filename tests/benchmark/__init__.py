"""Benchmarks: ratios of two things measured in one run, never a timed test. `python -m tests.benchmark`."""
