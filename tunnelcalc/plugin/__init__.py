"""The one door for plugins: what they offer, how they are loaded and contained."""
