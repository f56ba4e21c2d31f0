"""Draws time-current sheets from values, and says where every point of every line then lies."""
