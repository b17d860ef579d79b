"""How support and ground come to rest together, and whether the support is enough."""
