"""How the wall of a circular opening moves under pressure and along the drive. Pure functions."""
