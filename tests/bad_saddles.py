"""Runs over saddles wrong in one way each, in the manner of `tests/bad_designs.py`."""

from __future__ import annotations

from tests.bad_designs import Bad

SADDLES = """\
title = "Bad"
unit  = "mm"
[fitting.eye]
takes = 60

[[run]]
mark = "R"
supports = [[0, 0, 3000], [4000, 0, 3300], [8000, 0, 3000]]
over = "saddle"
stock = "7x7-4"
friction = 0.1
sag = 300
fittings = { from = "eye" }
"""
WEIGHED = SADDLES.replace("sag = 300", 'counterweight = "4 kg"')
CHAIN = SADDLES.replace("7x7-4", "DIN 763-6")
HEADER = "[[run]]"

BAD = [
    Bad("friction negative", SADDLES, "friction = 0.1", "friction = -0.1", "friction", "0 or more"),
    Bad("friction a length", SADDLES, "friction = 0.1", 'friction = "3 mm"', "friction", "length"),
    Bad("over misspelt", SADDLES, 'over = "saddle"', 'over = "sadle"', "over", "did you mean 'saddle'"),
    Bad("friction of a tied run", SADDLES, 'over = "saddle"', 'over = "fixed"', "friction", "give it with", "friction"),
    Bad("counterweight beside a sag", SADDLES, "sag = 300", 'sag = 300\ncounterweight = "4 kg"', "counterweight", "one", "counterweight"),
    Bad("counterweight negative", WEIGHED, '"4 kg"', '"-4 kg"', "counterweight", "0 or more"),
    Bad("counterweight a length", WEIGHED, '"4 kg"', '"4 m"', "counterweight", "length"),
    Bad("counterweight a list", WEIGHED, '"4 kg"', '["4 kg", "5 kg"]', "counterweight", "mass"),
    Bad("counterweight too light", WEIGHED, '"4 kg"', '"10 g"', "counterweight", "give at least 0."),
    Bad("counterweight with a fitting at its end", WEIGHED, 'from = "eye"', 'to = "eye"', "fittings", "count it in the counterweight"),
    Bad("counterweight of a tied run", WEIGHED.replace("friction = 0.1\n", ""), 'over = "saddle"', 'over = "fixed"', "counterweight", "give it with", "counterweight"),
    Bad("a list of sags", SADDLES, "sag = 300", "sag = [300, 320]", "sag", "2 values for one member that slides"),
    Bad("what differs in a bay", SADDLES, "sag = 300", "sag = 300\nbays = [{ bay = 2, sag = 200 }]", "bays", "slides over all", "bays"),
    Bad("loads", SADDLES, "sag = 300", 'sag = 300\nloads = [{ at_plan = 1500, mass = "3 kg" }]', "loads", "not solved over saddles", "loads"),
    Bad("spread", SADDLES, "sag = 300", 'sag = 300\nspread = "10 N/m"', "spread", "not solved over saddles", "spread"),
    Bad("sag too deep to rest", SADDLES, "sag = 300", "sag = 3000", "sag", "give at most"),
    Bad("lowest too deep to rest", SADDLES, "sag = 300", "lowest = 100", "lowest", "give at least"),
    Bad("lowest over a support", SADDLES, "sag = 300", "lowest = 3100", "lowest", "give less than that"),
    Bad("pull too little to rest", SADDLES, "sag = 300", 'pull = "0.1 N"', "pull", "give at least"),
    Bad("length too long to rest", SADDLES, "sag = 300", "length = 14000", "length", "give less than"),
    Bad("length too short", CHAIN, "sag = 300", "length = 8000", "length", "give more than 8022.4"),
    Bad("slack too great to rest", SADDLES, "sag = 300", "slack = 2", "slack", "give less than 1."),
    Bad("slack too little", SADDLES, "sag = 300", "slack = 0.9", "slack", "give more than 1"),
    Bad("links of a rope", SADDLES, "sag = 300", "links = 450", "links", "has no links"),
    Bad("links too few", CHAIN, "sag = 300", "links = 150", "links", "does not rest"),
    Bad("links too many to rest", CHAIN, "sag = 300", "links = 900", "links", "give at most"),
    Bad("links of another parity", CHAIN, "sag = 300", 'links = 441\nparity = "even"', "links", "is not even", "links"),
    Bad("whole links that do not reach", CHAIN, "sag = 300", 'slack = 1.0001\nround = "down"', "round", "does not rest", "round"),
    Bad("supports on one plumb line", SADDLES, "[4000, 0, 3300]", "[0, 0, 3300]", "supports", "plumb line"),
]  # fmt: skip
