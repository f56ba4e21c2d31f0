"""Figures of records: bands on log-log axes, and a reading laid over its sheet."""
