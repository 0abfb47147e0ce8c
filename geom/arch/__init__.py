"""Arches: hanging curves stood up, with thickness."""
