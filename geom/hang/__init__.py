"""Hanging members: the catenary and what is made of it."""
