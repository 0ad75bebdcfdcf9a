"""Benchmarks: ``python -m tests.benchmarks`` compares the core with general libraries."""
