"""tunnelcalc: from an alignment's ground to a support schedule that can be defended."""

__version__ = "0.1.0"
