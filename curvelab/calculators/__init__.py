"""Calculators: one question an engineer asks of devices a file; none knows how a device was read or stored."""
