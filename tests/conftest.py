"""Which values the property tests draw; and what is not collected.

The suite draws the same values each time, so that whether a change is taken does not hang on
luck. `--hypothesis-profile explore` draws new ones.
"""

from hypothesis import settings

settings.register_profile("same_each_time", derandomize=True)
settings.register_profile("explore")
settings.load_profile("same_each_time")

# The example plugin is a distribution of its own, with a test suite of its own.
collect_ignore = ["example_plugin"]
