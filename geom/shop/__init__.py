"""Shop arithmetic: cutting, rounding, tolerance."""
