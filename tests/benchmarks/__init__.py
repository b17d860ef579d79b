"""Speed and memory, measured on demand: `python -m tests.benchmarks`. No test times anything."""
