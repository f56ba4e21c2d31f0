"""Trains the network of the lettering room on drawn labels and measures it on faces it has never seen."""
