"""Axes: the printed grid measured sub-pixel, and the map between a place on the sheet and (current, value)."""
