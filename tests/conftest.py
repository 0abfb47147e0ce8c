"""Hypothesis without a clock, so that a busy machine fails no test; examples enough for laws of few numbers."""

from hypothesis import settings

settings.register_profile("sagwright", max_examples=50, deadline=None)
settings.load_profile("sagwright")
