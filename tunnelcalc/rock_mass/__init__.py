"""In-situ stress, strength and stiffness of the ground. Pure functions over arrays."""
