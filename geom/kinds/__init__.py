"""Kinds of feature: one small file each. See geom/registry.py for what a file here must end with."""
