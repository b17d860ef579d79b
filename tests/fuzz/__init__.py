"""Damaged inputs by the thousand, on demand: `python -m tests.fuzz --minutes 10`."""
