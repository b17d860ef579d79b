"""The way of the data: named stages that each say what they need and give."""
