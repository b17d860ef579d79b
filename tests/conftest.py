"""The example plugin is a distribution of its own, with a test suite of its own."""

collect_ignore = ["example_plugin"]
