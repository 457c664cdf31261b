"""Measurements of the program's own line on public records, run from the checkout's top.

`python -m tests.benchmarks.accuracy` and `python -m tests.benchmarks.speed`.
"""
