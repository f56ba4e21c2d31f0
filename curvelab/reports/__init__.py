"""Review and comparison documents of stored devices, as PDF and as one HTML file."""
