"""DXF as the shop accepts it: what drawing, model and parts have in common. Only these modules know the library."""
