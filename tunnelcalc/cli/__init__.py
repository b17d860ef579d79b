"""Commands, one module each, and the screen. Only this room knows the terminal."""
