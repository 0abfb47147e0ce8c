"""Hanging nets: patterns and equilibrium."""
