"""From a worksheet or a bare sheet to a reading: one file a station, joined in ``digitise``."""
