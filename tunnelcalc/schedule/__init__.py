"""From adequate classes to a schedule that can be built. Pure functions over arrays."""
