"""Devices: ratings, settings, elements and bands as one thing that can be asked and answers with status."""
