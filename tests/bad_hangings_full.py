"""Hangings that stretch, and are loaded, wrong in one way each, in the manner of `tests/bad_designs.py`."""

from __future__ import annotations

from tests.bad_designs import HANGING_HEADER, Bad

# ruff: noqa: E501 - a table, to be read by its columns

WIRE = """\
title = "Bad"
unit  = "mm"

[site]
temperature  = [-10, 20, 35]
support_give = "20 mm"
[stock.wire]
kind = "rope"
construction = "7x7"
diameter = "4 mm"

[[hanging]]
mark = "W"
from = [0, 0, 3000]
to = [4000, 3000, 2800]
stock = "wire"
sag = 300
"""

SITE = "temperature  = [-10, 20, 35]"
GIVE = 'support_give = "20 mm"'

BAD_FACTS = [
    Bad("sag_mid of nought", WIRE, "sag = 300", "sag_mid = 0", "sag_mid", "more than 0"),
    Bad("sag_mid a mass", WIRE, "sag = 300", 'sag_mid = "3 kg"', "sag_mid", "mass"),
    Bad("sag_mid beside sag", WIRE, "sag = 300", "sag = 300\nsag_mid = 300", "sag_mid", "one", "sag_mid"),
    Bad("end_pull of a mass", WIRE, "sag = 300", 'end_pull = "3 kg"\nbranch = "deep"', "end_pull", "mass", "end_pull"),
    Bad("end_pull of nought", WIRE, "sag = 300", 'end_pull = 0\nbranch = "deep"', "end_pull", "more than 0", "end_pull"),
    Bad("end_pull too little", WIRE, "sag = 300", 'end_pull = "1 N"\nbranch = "deep"', "end_pull", "give at least 2.33", "end_pull"),
    Bad("end_pull without its branch", WIRE, "sag = 300", 'end_pull = "40 N"', "branch", "two members have one end pull", HANGING_HEADER),
    Bad("branch of neither name", WIRE, "sag = 300", 'end_pull = "40 N"\nbranch = "long"', "branch", "is not known here", "branch"),
    Bad("branch nearly right", WIRE, "sag = 300", 'end_pull = "40 N"\nbranch = "shalow"', "branch", "shallow", "branch"),
    Bad("branch without its fact", WIRE, "sag = 300", 'sag = 300\nbranch = "deep"', "branch", "goes with `end_pull` alone", "branch"),
    Bad("through of two numbers", WIRE, "sag = 300", "through = [2000, 2000]", "through", "is no point"),
    Bad("through a number", WIRE, "sag = 300", "through = 2600", "through", "is no point"),
    Bad("through out of the plane", WIRE, "sag = 300", "through = [2000, 1600, 2600]", "through", "80 mm out of the upright plane"),
    Bad("through beyond an end", WIRE, "sag = 300", "through = [4800, 3600, 2600]", "through", "not between its supports"),
    Bad("through over the chord", WIRE, "sag = 300", "through = [2000, 1500, 2950]", "through", "give less than 2900 mm"),
    Bad("slope_from flatter than the chord", WIRE, "sag = 300", "slope_from = 2", "slope_from", "give more than 2.29061 degrees"),
    Bad("slope_to flatter than the chord", WIRE, "sag = 300", "slope_to = -3", "slope_to", "give more than -2.29061 degrees"),
    Bad("slope_from upright", WIRE, "sag = 300", "slope_from = 90", "slope_from", "between -90 and 90"),
    Bad("slope_to a length", WIRE, "sag = 300", 'slope_to = "3 m"', "slope_to", "length"),
    Bad("length far shorter than the chord", WIRE, "sag = 300", "length = 4800", "length", "4800 mm is shorter than the 5004 mm"),
    Bad("slack far under 1", WIRE, "sag = 300", "slack = 0.97", "slack", "does not reach"),
    Bad("sag_mid on a plumb line", WIRE, "to = [4000, 3000, 2800]\nstock = \"wire\"\nsag = 300", "to = [0, 0, 2800]\nstock = \"wire\"\nsag_mid = 300", "sag_mid", "no meaning between supports on one plumb line", "sag_mid"),
]  # fmt: skip

BAD_SITES = [
    Bad("temperature a number", WIRE, SITE, "temperature = 20", "temperature", "give [coldest, as hung, hottest]"),
    Bad("temperature of two", WIRE, SITE, "temperature = [-10, 35]", "temperature", "give [coldest, as hung, hottest]"),
    Bad("temperature falling", WIRE, SITE, "temperature = [35, 20, -10]", "temperature", "do not rise"),
    Bad("temperature with a length", WIRE, SITE, 'temperature = [-10, "20 mm", 35]', "temperature", "length"),
    Bad("temperature under nought kelvin", WIRE, SITE, "temperature = [-300, 20, 35]", "temperature", "-273.15"),
    Bad("support_give negative", WIRE, GIVE, "support_give = -20", "support_give", "0 or more"),
    Bad("support_give a mass", WIRE, GIVE, 'support_give = "2 kg"', "support_give", "mass"),
]

BAD = [*BAD_FACTS, *BAD_SITES]
