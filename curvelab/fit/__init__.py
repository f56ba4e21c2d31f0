"""Fit: points of one curve become a monotone, piecewise smooth model with explicit kinks and covariance."""
