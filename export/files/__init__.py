"""Outputs: one file each. See export/outputs.py for what a file here must end with."""
