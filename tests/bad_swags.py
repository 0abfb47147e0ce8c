"""Designs of swags and curtains that are wrong in one way each, in the manner of `tests/bad_designs.py`."""

from __future__ import annotations

from tests.bad_designs import Bad

HEAD = """\
title = "Bad"
unit  = "mm"

[fitting.cup]
takes = 10
[stock.nickel]
kind = "beads"
pitch = 6
mass_per_metre = 0.045
[stock.brass]
kind = "beads"
pitch = 6
mass_per_metre = 0.05
[stock.chain]
kind = "chain"
wire = 3
pitch = 16
width = 11

"""

ROW = (
    HEAD
    + """\
[[swags]]
mark = "B"
rail_from = [[0, 0, 3600], [0, 300, 3600]]
rail_to = [[2400, 0, 3600], [2400, 300, 3600]]
count = 4
stock = [{ of = "nickel", count = 1 }, { of = "brass", count = 3 }]
sag = [600, 650, 700, 750]
parity = "any"
round = "nearest"
copies = 2
fittings = { from = "cup", to = ["cup", 5] }
"""
)

STEPS = (
    HEAD
    + """\
[[swags]]
mark = "S"
rail_from = [[0, 0, 3600], [0, 300, 3600]]
rail_to = [[2400, 0, 3600], [2400, 300, 3600]]
count = 5
stock = "nickel"
sag = { first = 600, last = 750 }
"""
)

RINGS = (
    HEAD
    + """\
[[swags]]
mark = "D"
ring = { centre = [0, 0, 3000], diameter = 450, points = 6 }
to_ring = { centre = [0, 0, 2820], diameter = 800, points = 6 }
stock = "nickel"
slack = 1.12
parity = "odd"
"""
)

CURTAIN = (
    HEAD
    + """\
[[curtain]]
mark = "C"
rail = [[0, 0, 2700], [2000, 0, 2700]]
strands = 5
hem = [[0, 900], [1000, 800], [2000, 900]]
hem_shape = "catenary"
scallop = 180
stock = "chain"
parity = "odd"
round = "down"
copies = 3
fittings = { from = "cup" }
"""
)

SWAGS_HEADER, CURTAIN_HEADER = "[[swags]]", "[[curtain]]"

BAD_ROWS = [
    Bad("mark absent", ROW, 'mark = "B"\n', "", "mark", "is missing", SWAGS_HEADER),
    Bad("mark a number", ROW, 'mark = "B"', "mark = 2", "mark", "is no text"),
    Bad("rail_from absent", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]\n", "", "rail_from", "is missing; give one of rail_from, ring", SWAGS_HEADER),
    Bad("rail_from a name", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]", 'rail_from = "P1"', "rail_from", "list"),
    Bad("rail_from one point", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]", "rail_from = [[0, 0, 3600]]", "rail_from", "at least two different points"),
    Bad("rail_from one place", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]", "rail_from = [[0, 0, 3600], [0, 0, 3600]]", "rail_from", "at least two different points"),
    Bad("rail_from of numbers", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]", "rail_from = [0, [0, 300, 3600]]", "rail_from[1]", "is no point"),
    Bad("rail_from on plan only", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]", "rail_from = [[0, 0], [0, 300, 3600]]", "rail_from[1]", "is no point"),
    Bad("rail_from with a mass", ROW, "rail_from = [[0, 0, 3600],", 'rail_from = [[0, 0, "3 kg"],', "rail_from[1]", "mass"),
    Bad("rail_to absent", ROW, "rail_to = [[2400, 0, 3600], [2400, 300, 3600]]\n", "", "rail_to", "is missing", SWAGS_HEADER),
    Bad("rail_to at rail_from", ROW, "rail_to = [[2400, 0, 3600], [2400, 300, 3600]]", "rail_to = [[0, 0, 3600], [0, 300, 3600]]", "rail_to", "the same point"),
    Bad("rail_to of text", ROW, "rail_to = [[2400, 0, 3600],", 'rail_to = [[2400, 0, "high"],', "rail_to[1]", "is no length"),
    Bad("rail_to empty", ROW, "rail_to = [[2400, 0, 3600], [2400, 300, 3600]]", "rail_to = []", "rail_to", "at least two different points"),
    Bad("branch without its fact", ROW, "copies = 2", 'branch = "deep"\ncopies = 2', "branch", "goes with `end_pull` alone"),
    Bad("branch of neither name", ROW, "copies = 2", 'branch = "long"\ncopies = 2', "branch", "is not known here"),
    Bad("count absent", ROW, "count = 4\n", "", "count", "is missing", SWAGS_HEADER),
    Bad("count of nought", ROW, "count = 4", "count = 0", "count", "from 1"),
    Bad("count of one", ROW, "count = 4", "count = 1", "count", "give 2 or more"),
    Bad("count a fraction", ROW, "count = 4", "count = 4.5", "count", "whole number"),
    Bad("count without end", ROW, "count = 4", "count = 1000000000", "count", "100000"),
    Bad("count beside a ring", ROW, "rail_from = [[0, 0, 3600], [0, 300, 3600]]\nrail_to = [[2400, 0, 3600], [2400, 300, 3600]]", "ring = { centre = [0, 0, 0], diameter = 900, points = 4 }", "count", "`ring` and `count`", "count"),
    Bad("rail_from beside a ring", ROW, "rail_to = [[2400, 0, 3600], [2400, 300, 3600]]\ncount = 4", "ring = { centre = [0, 0, 0], diameter = 900, points = 4 }", "ring", "just one of them", "ring"),
    Bad("stock absent", ROW, 'stock = [{ of = "nickel", count = 1 }, { of = "brass", count = 3 }]\n', "", "stock", "is missing", SWAGS_HEADER),
    Bad("stock unknown", ROW, '{ of = "nickel", count = 1 }', '{ of = "nikel", count = 1 }', "stock[1].of", "did you mean 'nickel'"),
    Bad("stock a number", ROW, '[{ of = "nickel", count = 1 }, { of = "brass", count = 3 }]', "6", "stock", "is no stock"),
    Bad("stock of names", ROW, '[{ of = "nickel", count = 1 }, { of = "brass", count = 3 }]', '["nickel", { of = "brass", count = 3 }]', "stock[1]", "is no table"),
    Bad("stock empty", ROW, '[{ of = "nickel", count = 1 }, { of = "brass", count = 3 }]', "[]", "stock", "empty list"),
    Bad("zone without stock", ROW, '{ of = "nickel", count = 1 }', "{ count = 1 }", "stock[1].of", "is missing"),
    Bad("zone without count", ROW, '{ of = "nickel", count = 1 }', '{ of = "nickel" }', "stock[1].count", "is missing"),
    Bad("zone of nought", ROW, '{ of = "nickel", count = 1 }', '{ of = "nickel", count = 0 }', "stock[1].count", "from 1"),
    Bad("zone's key unknown", ROW, '{ of = "nickel", count = 1 }', '{ of = "nickel", cuont = 1 }', "stock[1].cuont", "did you mean 'count'"),
    Bad("zones too few", ROW, '{ of = "brass", count = 3 }', '{ of = "brass", count = 2 }', "stock", "zones for 3 strands, but there are 4"),
    Bad("no fact", ROW, "sag = [600, 650, 700, 750]\n", "", "length", "is missing; give one of", SWAGS_HEADER),
    Bad("two facts", ROW, "sag = [600, 650, 700, 750]", "sag = [600, 650, 700, 750]\nslack = 1.1", "slack", "just one"),
    Bad("facts too few", ROW, "sag = [600, 650, 700, 750]", "sag = [600, 650, 700]", "sag", "3 values for 4 strands"),
    Bad("facts none", ROW, "sag = [600, 650, 700, 750]", "sag = []", "sag", "empty list"),
    Bad("a fact of text", ROW, "sag = [600, 650, 700, 750]", 'sag = [600, "deep", 700, 750]', "sag[2]", "is no length"),
    Bad("one fact of text", ROW, "sag = [600, 650, 700, 750]", 'sag = "deep"', "sag", "is no length"),
    Bad("a fact under nought", ROW, "sag = [600, 650, 700, 750]", "sag = [600, 650, 700, -750]", "sag[4]", "more than 0"),
    Bad("a length too short", ROW, "sag = [600, 650, 700, 750]", "length = [2500, 2300, 2500, 2500]", "length[2]", "strand 2: 2300 mm is shorter than the 2400 mm"),
    Bad("all lengths too short", ROW, "sag = [600, 650, 700, 750]", "length = 2300", "length", "strand 4: 2300 mm is shorter"),
    Bad("links a fraction", ROW, "sag = [600, 650, 700, 750]", "links = [460, 460, 460.5, 460]", "links[3]", "whole number"),
    Bad("links too few", ROW, "sag = [600, 650, 700, 750]", "links = [460, 460, 300, 460]", "links[3]", "give at least"),
    Bad("slack of one", ROW, "sag = [600, 650, 700, 750]", "slack = [1.1, 1.1, 1.1, 1]", "slack[4]", "more than 1"),
    Bad("lowest over the rail", ROW, "sag = [600, 650, 700, 750]", "lowest = [2800, 2800, 2800, 3700]", "lowest[4]", "not under the lower support"),
    Bad("pull in metres", ROW, "sag = [600, 650, 700, 750]", 'pull = "3 m"', "pull", "length"),
    Bad("parity unknown", ROW, 'parity = "any"', 'parity = "odds"', "parity", "did you mean 'odd'"),
    Bad("round unknown", ROW, 'round = "nearest"', 'round = "upp"', "round", "did you mean 'up'"),
    Bad("links over a million", ROW, "copies = 2", "copies = 1000", "copies", "a design has at most 1000000"),
    Bad("copies of nought", ROW, "copies = 2", "copies = 0", "copies", "from 1"),
    Bad("fitting unknown", ROW, 'from = "cup", to', 'from = "cap", to', "fittings.from", "did you mean 'cup'"),
    Bad("fittings a text", ROW, 'fittings = { from = "cup", to = ["cup", 5] }', 'fittings = "cup"', "fittings", "table"),
    Bad("key unknown", ROW, "copies = 2", "copys = 2", "copys", "did you mean 'copies'"),
    Bad("a support's key", ROW, "copies = 2", 'from = "P1"', "from", "is not known"),
    Bad("one bracket", ROW, "[[swags]]", "[swags]", "", "two brackets"),
]  # fmt: skip

BAD_STEPS = [
    Bad("first absent", STEPS, "{ first = 600, last = 750 }", "{ last = 750 }", "sag.first", "is missing; give the first"),
    Bad("last absent", STEPS, "{ first = 600, last = 750 }", "{ first = 600 }", "sag.last", "is missing; give the last"),
    Bad("last misspelt", STEPS, "last = 750", "lst = 750", "sag.lst", "did you mean 'last'"),
    Bad("first of text", STEPS, "first = 600", 'first = "low"', "sag.first", "is no length"),
    Bad("first under nought", STEPS, "first = 600", "first = -600", "sag.first", "more than 0"),
    Bad("first too short", STEPS, "sag = { first = 600, last = 750 }", "length = { first = 2390, last = 3000 }", "length.first", "strand 1: 2390 mm is shorter"),
    Bad("last too short", STEPS, "sag = { first = 600, last = 750 }", "length = { first = 3000, last = 2300 }", "length", "strand 5: 2300 mm is shorter"),
    Bad("first a fraction", STEPS, "sag = { first = 600, last = 750 }", "links = { first = 460.5, last = 470 }", "links.first", "whole number"),
]  # fmt: skip

BAD_RINGS = [
    Bad("ring absent", RINGS, "ring = { centre = [0, 0, 3000], diameter = 450, points = 6 }\nto_ring", "to_ring", "rail_from", "is missing; give one of rail_from, ring", SWAGS_HEADER),
    Bad("ring a number", RINGS, "ring = { centre = [0, 0, 3000], diameter = 450, points = 6 }", "ring = 450", "ring", "is no table"),
    Bad("centre absent", RINGS, "centre = [0, 0, 3000], ", "", "ring.centre", "is missing"),
    Bad("centre a number", RINGS, "centre = [0, 0, 3000]", "centre = 3000", "ring.centre", "is no point"),
    Bad("diameter absent", RINGS, "diameter = 450, ", "", "ring.diameter", "is missing"),
    Bad("diameter of nought", RINGS, "diameter = 450", "diameter = 0", "ring.diameter", "more than 0"),
    Bad("diameter in newtons", RINGS, "diameter = 450", 'diameter = "450 N"', "ring.diameter", "force"),
    Bad("points absent", RINGS, "diameter = 450, points = 6", "diameter = 450", "ring.points", "is missing"),
    Bad("points a fraction", RINGS, "diameter = 450, points = 6", "diameter = 450, points = 6.5", "ring.points", "whole number"),
    Bad("points of nought", RINGS, "diameter = 450, points = 6", "diameter = 450, points = 0", "ring.points", "from 1"),
    Bad("one point to itself", RINGS, "points = 6 }\nto_ring = { centre = [0, 0, 2820], diameter = 800, points = 6 }\n", "points = 1 }\n", "ring.points", "give 2 or more", "ring"),
    Bad("points of another number", RINGS, "diameter = 800, points = 6", "diameter = 800, points = 8", "to_ring.points", "has 8 points and `ring` has 6"),
    Bad("ring's key unknown", RINGS, "diameter = 450", "diametre = 450", "ring.diametre", "did you mean 'diameter'"),
    Bad("to_ring a list", RINGS, "to_ring = { centre = [0, 0, 2820], diameter = 800, points = 6 }", "to_ring = [0, 0, 2820]", "to_ring", "is no table"),
    Bad("to_ring at ring", RINGS, "centre = [0, 0, 2820], diameter = 800", "centre = [0, 0, 3000], diameter = 450", "to_ring", "the same point"),
    Bad("to_ring beside a rail", RINGS, "ring = { centre = [0, 0, 3000], diameter = 450, points = 6 }\nto_ring", "rail_from = [[0, 0, 3600], [0, 300, 3600]]\nrail_to = [[2400, 0, 3600], [2400, 300, 3600]]\ncount = 6\nto_ring", "to_ring", "just one of them", "to_ring"),
    Bad("links against parity", RINGS, "slack = 1.12", "links = 46", "links", "is not odd"),
]  # fmt: skip

BAD_CURTAINS = [
    Bad("mark absent", CURTAIN, 'mark = "C"\n', "", "mark", "is missing", CURTAIN_HEADER),
    Bad("rail absent", CURTAIN, "rail = [[0, 0, 2700], [2000, 0, 2700]]\n", "", "rail", "is missing", CURTAIN_HEADER),
    Bad("rail a number", CURTAIN, "rail = [[0, 0, 2700], [2000, 0, 2700]]", "rail = 2000", "rail", "list"),
    Bad("rail of one point", CURTAIN, "rail = [[0, 0, 2700], [2000, 0, 2700]]", "rail = [[0, 0, 2700]]", "rail", "at least two different points"),
    Bad("rail upright", CURTAIN, "rail = [[0, 0, 2700], [2000, 0, 2700]]", "rail = [[0, 0, 2700], [0, 0, 4700]]", "rail", "stands upright"),
    Bad("rail of text", CURTAIN, "rail = [[0, 0, 2700],", 'rail = [[0, 0, "high"],', "rail[1]", "is no length"),
    Bad("rail's point of two", CURTAIN, "rail = [[0, 0, 2700],", "rail = [[0, 2700],", "rail[1]", "is no point"),
    Bad("strands absent", CURTAIN, "strands = 5\n", "", "strands", "is missing; give one of strands, spacing", CURTAIN_HEADER),
    Bad("strands of one", CURTAIN, "strands = 5", "strands = 1", "strands", "give 2 or more"),
    Bad("strands a fraction", CURTAIN, "strands = 5", "strands = 5.5", "strands", "whole number"),
    Bad("strands of nought", CURTAIN, "strands = 5", "strands = 0", "strands", "from 1"),
    Bad("strands without end", CURTAIN, "strands = 5", "strands = 100001", "strands", "100000"),
    Bad("strands and spacing", CURTAIN, "strands = 5", "strands = 5\nspacing = 50", "spacing", "just one", "spacing"),
    Bad("spacing of nought", CURTAIN, "strands = 5", "spacing = 0", "spacing", "more than 0"),
    Bad("spacing of text", CURTAIN, "strands = 5", 'spacing = "close"', "spacing", "is no length"),
    Bad("spacing over the rail", CURTAIN, "strands = 5", "spacing = 2001", "spacing", "one strand on a rail of 2000 mm"),
    Bad("spacing too close", CURTAIN, "strands = 5", 'spacing = "0.001 mm"', "spacing", "over 100000 strands"),
    Bad("links over a million", CURTAIN, "strands = 5", "strands = 50000", "strands", "a design has at most 1000000"),
    Bad("hem absent", CURTAIN, "hem = [[0, 900], [1000, 800], [2000, 900]]\n", "", "hem", "is missing", CURTAIN_HEADER),
    Bad("hem of one point", CURTAIN, "hem = [[0, 900], [1000, 800], [2000, 900]]", "hem = [[0, 900]]", "hem", "at least two"),
    Bad("hem a number", CURTAIN, "hem = [[0, 900], [1000, 800], [2000, 900]]", "hem = 900", "hem", "is no hem"),
    Bad("hem's point of three", CURTAIN, "hem = [[0, 900],", "hem = [[0, 0, 900],", "hem", "is no point of a hem"),
    Bad("hem of text", CURTAIN, "hem = [[0, 900],", 'hem = [[0, "low"],', "hem[1][2]", "is no length"),
    Bad("hem not in order", CURTAIN, "[1000, 800], [2000, 900]]", "[2000, 800], [1000, 900]]", "hem", "do not increase"),
    Bad("hem too short", CURTAIN, "[2000, 900]]", "[1900, 900]]", "hem", "runs from 0 mm to 1900 mm"),
    Bad("hem begins late", CURTAIN, "hem = [[0, 900],", "hem = [[100, 900],", "hem", "runs from 100 mm to 2000 mm"),
    Bad("hem over the rail", CURTAIN, "hem = [[0, 900],", "hem = [[0, 2800],", "hem", "is 100 mm over the rail at strand 1"),
    Bad("hem at the rail", CURTAIN, "hem = [[0, 900],", "hem = [[0, 2700],", "hem", "meets the rail at strand 1"),
    Bad("hem under no link", CURTAIN, "hem = [[0, 900],", "hem = [[0, 2680],", "hem", "too little for a count of links that is odd"),
    Bad("hem_shape unknown", CURTAIN, 'hem_shape = "catenary"', 'hem_shape = "catenery"', "hem_shape", "did you mean 'catenary'"),
    Bad("hem_shape a number", CURTAIN, 'hem_shape = "catenary"', "hem_shape = 1", "hem_shape", "give one of"),
    Bad("scallop absent", CURTAIN, "scallop = 180\n", "", "scallop", "is missing", CURTAIN_HEADER),
    Bad("scallop of a straight hem", CURTAIN, 'hem_shape = "catenary"', 'hem_shape = "straight"', "scallop", 'goes with a hem_shape of "catenary"', "scallop"),
    Bad("scallop of nought", CURTAIN, "scallop = 180", "scallop = 0", "scallop", "more than 0"),
    Bad("scallop in kilograms", CURTAIN, "scallop = 180", 'scallop = "2 kg"', "scallop", "mass"),
    Bad("stock absent", CURTAIN, 'stock = "chain"\n', "", "stock", "is missing", CURTAIN_HEADER),
    Bad("stock unknown", CURTAIN, 'stock = "chain"', 'stock = "chian"', "stock", "did you mean 'chain'"),
    Bad("zones too many", CURTAIN, 'stock = "chain"', 'stock = [{ of = "chain", count = 6 }]', "stock", "zones for 6 strands, but there are 5"),
    Bad("parity unknown", CURTAIN, 'parity = "odd"', 'parity = "od"', "parity", "did you mean 'odd'"),
    Bad("round unknown", CURTAIN, 'round = "down"', 'round = "dwon"', "round", "did you mean 'down'"),
    Bad("copies of nought", CURTAIN, "copies = 3", "copies = 0", "copies", "from 1"),
    Bad("fitting unknown", CURTAIN, 'from = "cup"', 'from = "cap"', "fittings.from", "did you mean 'cup'"),
    Bad("fittings longer than the drop", CURTAIN, 'from = "cup"', "from = 3000", "hem", "at strand 1 (and 4 others), too little", "hem ="),
    Bad("a rope too short", CURTAIN, 'stock = "chain"\nparity = "odd"\nround = "down"\ncopies = 3\nfittings = { from = "cup" }', 'stock = "7x7-4"\nfittings = { from = 3000 }', "hem", "too little for fittings and a cut of 1 mm", "hem ="),
    Bad("a fact", CURTAIN, "copies = 3", "sag = 300", "sag", "is not known"),
    Bad("key unknown", CURTAIN, "scallop = 180", "scalop = 180", "scalop", "did you mean 'scallop'"),
    Bad("one bracket", CURTAIN, "[[curtain]]", "[curtain]", "", "two brackets"),
]  # fmt: skip

BAD = [*BAD_ROWS, *BAD_STEPS, *BAD_RINGS, *BAD_CURTAINS]
