"""What the distribution itself offers through the hooks. Nothing in the core imports this room."""
