"""Pure computation: designs in, neutral results out; no file is written here."""
