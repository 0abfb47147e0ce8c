"""Hangings that stretch, and are loaded, wrong in one way each, in the manner of `tests/bad_designs.py`."""

from __future__ import annotations

from tests.bad_designs import HANGING_HEADER, Bad

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
DRAWN = """\
title = "Bad"
unit  = "mm"

[drawing]
links = "rigid"
[[hanging]]
mark = "C"
from = [0, 0, 3000]
to = [4000, 3000, 2800]
stock = "DIN 763-6"
sag = 300
"""

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

LOADED = """\
title = "Bad"
unit  = "mm"

[site]
wind = "500 Pa"

[[hanging]]
mark = "W"
from = [0, 0, 3000]
to = [4000, 3000, 2800]
stock = "DIN 763-6"
sag = 300
loads = [{ mark = "A", at = 1500, mass = "3 kg", hanger = 600, area = "0.06 m2", drag = 1.2 }, { at_plan = 3000, force = "20 N" }]
spread = "120 N/m"
check_load = "100 kg"
"""

RUN = """\
title = "Bad"
unit  = "mm"

[[run]]
mark = "R"
supports = [[0, 0, 3000], [4000, 0, 3000], [8000, 0, 3000]]
stock = "DIN 763-6"
sag = 300
loads = [{ at_plan = 1500, mass = "3 kg" }]
spread = "20 N/m"
check_load = "100 kg"
bays = [{ bay = 2, loads = [{ at = 900, force = "5 N" }], spread = "30 N/m", check_load = "80 kg" }]
"""

BAD_LOADS = [
    Bad(
        "loads a mass",
        LOADED,
        'loads = [{ mark = "A", at = 1500, mass = "3 kg", hanger = 600, area = "0.06 m2", drag = 1.2 }, { at_plan = 3000, force = "20 N" }]',
        'loads = "3 kg"',
        "loads",
        "list",
    ),
    Bad(
        "load nowhere",
        LOADED,
        '{ at_plan = 3000, force = "20 N" }',
        '{ force = "20 N" }',
        "loads",
        "is missing; give one of at, at_plan",
        "loads",
    ),
    Bad("load at two places", LOADED, "at = 1500,", "at = 1500, at_plan = 1500,", "loads", "one"),
    Bad("load of no weight", LOADED, ', mass = "3 kg"', "", "loads", "is missing; give one of mass, force"),
    Bad("load of two weights", LOADED, 'mass = "3 kg"', 'mass = "3 kg", force = "3 N"', "loads", "one"),
    Bad("load at a mass", LOADED, "at = 1500", 'at = "1500 kg"', "loads", "mass"),
    Bad("load at its end", LOADED, "at = 1500", "at = 0", "loads", "more than 0"),
    Bad("load beyond the member", LOADED, "at = 1500", "at = 5400", "loads", "is not between its supports"),
    Bad(
        "load on plan beyond the span",
        LOADED,
        "at_plan = 3000",
        "at_plan = 5000",
        "loads",
        "is not between its supports",
    ),
    Bad("load of a negative mass", LOADED, 'mass = "3 kg"', 'mass = "-3 kg"', "loads", "0 or more"),
    Bad("load of a mass in metres", LOADED, 'mass = "3 kg"', 'mass = "3 m"', "loads", "length"),
    Bad("load of no force", LOADED, 'force = "20 N"', "force = 0", "loads", "more than 0"),
    Bad("load of a force in kilograms", LOADED, 'force = "20 N"', 'force = "20 kg"', "loads", "mass"),
    Bad("hanger upward", LOADED, "hanger = 600", "hanger = -600", "loads", "0 or more"),
    Bad("area without a unit", LOADED, 'area = "0.06 m2"', "area = 0.06", "loads", "unit"),
    Bad("area without its drag", LOADED, ", drag = 1.2", "", "loads", "is missing; give the drag coefficient", "loads"),
    Bad("drag a length", LOADED, "drag = 1.2", 'drag = "1.2 m"', "loads", "length"),
    Bad("load's mark a number", LOADED, 'mark = "A"', "mark = 1", "loads", "is no text"),
    Bad("two loads of one mark", LOADED, 'mark = "A"', 'mark = "L2"', "loads", "the mark of two loads"),
    Bad("load's key misspelt", LOADED, "hanger =", "hangar =", "loads", "hanger"),
    Bad("spread of nothing", LOADED, 'spread = "120 N/m"', 'spread = "0 N/m"', "spread", "more than 0"),
    Bad("spread without a unit", LOADED, 'spread = "120 N/m"', "spread = 120", "spread", "unit"),
    Bad("spread a mass", LOADED, 'spread = "120 N/m"', 'spread = "12 kg"', "spread", "mass"),
    Bad("check_load negative", LOADED, 'check_load = "100 kg"', 'check_load = "-100 kg"', "check_load", "0 or more"),
    Bad("check_load a length", LOADED, 'check_load = "100 kg"', 'check_load = "2 m"', "check_load", "length"),
    Bad("wind negative", LOADED, 'wind = "500 Pa"', 'wind = "-500 Pa"', "wind", "0 or more"),
    Bad("wind a speed", LOADED, 'wind = "500 Pa"', 'wind = "20 m/s"', "wind", "20 m/s"),
    Bad("wind without a unit", LOADED, 'wind = "500 Pa"', "wind = 500", "wind", "unit"),
    Bad(
        "loads on a plumb line",
        LOADED,
        'to = [4000, 3000, 2800]\nstock = "DIN 763-6"\nsag = 300',
        'to = [0, 0, 2800]\nstock = "DIN 763-6"\nlength = 3000',
        "loads",
        "two strands on one plumb line",
        "loads",
    ),
    Bad("run's load along a bay", RUN, "at_plan = 1500", "at = 1500", "loads", "give `at_plan` along the run"),
    Bad("run's load beyond it", RUN, "at_plan = 1500", "at_plan = 8000", "loads", "at no place between two supports"),
    Bad(
        "run's load at a support", RUN, "at_plan = 1500", "at_plan = 4000", "loads", "at no place between two supports"
    ),
    Bad("run's spread a mass", RUN, 'spread = "20 N/m"', 'spread = "20 kg"', "spread", "mass"),
    Bad("run's check_load a length", RUN, 'check_load = "100 kg"', 'check_load = "2 m"', "check_load", "length"),
    Bad("bay's load beyond it", RUN, "at = 900", "at = 9000", "bays", "is not between its supports"),
    Bad("bay's spread of nothing", RUN, 'spread = "30 N/m"', 'spread = "0 N/m"', "bays", "more than 0"),
    Bad("bay's check_load of text", RUN, 'check_load = "80 kg"', 'check_load = "heavy"', "bays", "heavy"),
]

BAD_DRAWINGS = [
    Bad("links of neither kind", DRAWN, 'links = "rigid"', 'links = "stiff"', "links", "is not known here"),
    Bad("links a number", DRAWN, 'links = "rigid"', "links = 35", "links", "is not known here", "links"),
]

BAD = [*BAD_DRAWINGS, *BAD_FACTS, *BAD_SITES, *BAD_LOADS]
