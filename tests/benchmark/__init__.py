"""Accuracy, coverage and speed on drawn sheets with known truth: ``python -m tests.benchmark``."""
