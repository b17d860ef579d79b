"""From files to a checked project: every value with its place, every problem told at once."""
