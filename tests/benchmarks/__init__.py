"""Ratios measured in one run."""
