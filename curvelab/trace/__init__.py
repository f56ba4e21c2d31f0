"""Lines of a sheet followed along their centres, sub-pixel, with a standard deviation at each place."""
