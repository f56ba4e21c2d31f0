"""Invented sheets with exactly known truth: what `curvelab demo` reads and the tests measure against."""
