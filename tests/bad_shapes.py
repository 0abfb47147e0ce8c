"""Arches and nets that are wrong in one way each; see `tests/bad_designs.py` for how they are written."""

from __future__ import annotations

from tests.bad_designs import Bad

ARCH = """\
unit = "mm"

[material.mine]
density = 1900
strength = "5 MPa"
source = "weighed"
[support.west]
at = [0, 0, 0]

[[arch]]
mark = "A1"
from = "west"
to = [2000, 0, 0]
rise = 1500
face = "intrados"
shape = "catenary"
curve = "axis"
thickness = 215
depth = 440
foot = "level"
section = "rectangle"
material = "mine"
blocks = 21
joint = 10
setting_out = { step = 100, widths_at = [300] }
"""

NET = """\
unit = "mm"

[support.A]
at = [0, 0, 3000]

[[net]]
mark = "K"
pattern = "square"
outline = [[0, 0, 3000], [3000, 0, 3000], [3000, 2400, 3000], [0, 2400, 3000]]
spacing = 600
anchors = "corners"
stock = "DIN 766-4"
edge_stock = "DIN 766-5"
members = "hanging"
force_density = { field = "10 N/m", edge = "40 N/m" }
node_mass = "40 g"
copies = 1
"""

_A, _N = "[[arch]]", "[[net]]"
_OUTLINE = "[[0, 0, 3000], [3000, 0, 3000], [3000, 2400, 3000], [0, 2400, 3000]]"

BAD_ARCHES = [
    Bad("arch without mark", ARCH, 'mark = "A1"\n', "", "mark", "is missing", _A),
    Bad("arch without springing", ARCH, 'from = "west"\n', "", "from", "is missing", _A),
    Bad("arch from an unknown support", ARCH, 'from = "west"', 'from = "wset"', "from", "did you mean 'west'"),
    Bad("arch to a number", ARCH, "to = [2000, 0, 0]", "to = 2000", "to", "is no support"),
    Bad("arch of no span", ARCH, "to = [2000, 0, 0]", "to = [0, 0, 0]", "to", "give two springings apart"),
    Bad("arch on one plumb line", ARCH, "to = [2000, 0, 0]", "to = [0, 0, 900]", "to", "give two springings apart"),
    Bad("arch without fact", ARCH, "rise = 1500\n", "", "rise", "is missing; give one of", _A),
    Bad("arch of two facts", ARCH, "rise = 1500", "rise = 1500\nlength = 4000", "length", "just one"),
    Bad("arch's rise of text", ARCH, "rise = 1500", 'rise = "high"', "rise", "is no length"),
    Bad("arch's rise of nought", ARCH, "rise = 1500", "rise = 0", "rise", "more than 0"),
    Bad("arch's rise in newtons", ARCH, "rise = 1500", 'rise = "3 kN"', "rise", "force"),
    Bad("arch shorter than its span", ARCH, "rise = 1500", "length = 1900", "length", "2000"),
    Bad("arch's thrust of nought", ARCH, "rise = 1500", "thrust = 0", "thrust", "more than 0"),
    Bad("arch's thrust in metres", ARCH, "rise = 1500", 'thrust = "2 m"', "thrust", "length"),
    Bad("arch through a number", ARCH, "rise = 1500", "through = 4", "through", "is no point"),
    Bad("arch through a point outside", ARCH, "rise = 1500", "through = [5000, 300]", "through", "over 0 and under 2000 mm"),
    Bad("arch's face unknown", ARCH, 'face = "intrados"', 'face = "inside"', "face", "give one of"),
    Bad("arch's face misspelt", ARCH, 'face = "intrados"', 'face = "intradoss"', "face", "did you mean 'intrados'"),
    Bad("arch's shape unknown", ARCH, 'shape = "catenary"', 'shape = "catenery"', "shape", "did you mean 'catenary'"),
    Bad("arch's curve a number", ARCH, 'curve = "axis"', "curve = 1", "curve", "give one of"),
    Bad("arch without thickness", ARCH, "thickness = 215\n", "", "thickness", "is missing", _A),
    Bad("arch's thickness of nought", ARCH, "thickness = 215", "thickness = 0", "thickness", "more than 0"),
    Bad("arch that folds", ARCH, 'face = "intrados"\nshape = "catenary"\ncurve = "axis"\nthickness = 215', 'face = "axis"\nshape = "catenary"\ncurve = "axis"\nthickness = 2150', "thickness", "give", "thickness ="),
    Bad("arch's depth in kilograms", ARCH, "depth = 440", 'depth = "3 kg"', "depth", "mass"),
    Bad("arch's depth of nought", ARCH, "depth = 440", "depth = 0", "depth", "more than 0"),
    Bad("arch's foot unknown", ARCH, 'foot = "level"', 'foot = "levl"', "foot", "did you mean 'level'"),
    Bad("arch's section unknown", ARCH, 'section = "rectangle"', 'section = "rectangel"', "section", "rectangle"),
    Bad("arch's material unknown", ARCH, 'material = "mine"', 'material = "min"', "material", "did you mean 'mine'"),
    Bad("arch's material a number", ARCH, 'material = "mine"', "material = 1900", "material", "1900"),
    Bad("arch of one block", ARCH, "blocks = 21", "blocks = 1", "blocks", "an odd number for a keystone"),
    Bad("arch of half a block", ARCH, "blocks = 21", "blocks = 20.5", "blocks", "whole number"),
    Bad("arch's joint under nought", ARCH, "joint = 10", "joint = -10", "joint", "0 or more"),
    Bad("arch's joint wider than its blocks", ARCH, "joint = 10", "joint = 400", "joint", "give thinner joints or fewer blocks"),
    Bad("arch's step of nought", ARCH, "step = 100", "step = 0", "setting_out.step", "more than 0"),
    Bad("arch's step misspelt", ARCH, "step = 100", "stp = 100", "setting_out.stp", "did you mean 'step'"),
    Bad("arch's key unknown", ARCH, "depth = 440", "depth = 440\ncolour = 1", "colour", "is not known"),
    Bad("arch's key of a later version", ARCH, "depth = 440", "depth = 440\nribs = 3", "ribs", "not solved by this version"),
    Bad("material without density", ARCH, "density = 1900\n", "", "density", "is missing", "[material.mine]"),
    Bad("material's density of nought", ARCH, "density = 1900", "density = 0", "density", "more than 0"),
    Bad("material's strength without unit", ARCH, 'strength = "5 MPa"', "strength = 5", "strength", "no unit"),
]  # fmt: skip

BAD_NETS = [
    Bad("net without mark", NET, 'mark = "K"\n', "", "mark", "is missing", _N),
    Bad("net's pattern unknown", NET, 'pattern = "square"', 'pattern = "sqare"', "pattern", "did you mean 'square'"),
    Bad("net's pattern a number", NET, 'pattern = "square"', "pattern = 4", "pattern", "no pattern"),
    Bad("net without outline", NET, f"outline = {_OUTLINE}\n", "", "outline", "is missing", _N),
    Bad("net of three corners", NET, ", [0, 2400, 3000]]", "]", "outline", "four"),
    Bad("net's outline a text", NET, f"outline = {_OUTLINE}", 'outline = "square"', "outline", "is no list"),
    Bad("net's outline with a mass", NET, "[3000, 0, 3000], [3000, 2400", '["3 kg", 0, 3000], [3000, 2400', "outline[2]", "mass", "outline ="),
    Bad("net that crosses itself", NET, "[3000, 2400, 3000], [0, 2400, 3000]]", "[0, 2400, 3000], [3000, 2400, 3000]]", "outline", "in order round the net"),
    Bad("net of no area", NET, "[3000, 2400, 3000], [0, 2400, 3000]]", "[3000, 0, 3000], [0, 0, 3000]]", "outline", "move one"),
    Bad("net without spacing", NET, "spacing = 600\n", "", "spacing", "is missing; give one of", _N),
    Bad("net of two spacings", NET, "spacing = 600", "spacing = 600\ndivisions = 4", "divisions", "just one"),
    Bad("net's spacing of nought", NET, "spacing = 600", "spacing = 0", "spacing", "more than 0"),
    Bad("net's spacing over its outline", NET, "spacing = 600", "spacing = 9000", "spacing", "at most that"),
    Bad("net's divisions a fraction", NET, "spacing = 600", "divisions = 4.5", "divisions", "whole number"),
    Bad("net's divisions of nought", NET, "spacing = 600", "divisions = 0", "divisions", "from 1"),
    Bad("net without anchors", NET, 'anchors = "corners"\n', "", "anchors", "is missing", _N),
    Bad("net's anchors unknown", NET, 'anchors = "corners"', 'anchors = "cornrs"', "anchors", "corners"),
    Bad("net's anchor an unknown support", NET, 'anchors = "corners"', 'anchors = ["A", "B"]', "anchors[2]", "there is no support"),
    Bad("net's anchor off the net", NET, 'anchors = "corners"', 'anchors = ["A", [3000, 0, 3000], [9000, 9000, 3000]]', "anchors[3]", "nearest node"),
    Bad("net without stock", NET, 'stock = "DIN 766-4"\nedge_', "edge_", "stock", "is missing", _N),
    Bad("net's stock unknown", NET, 'stock = "DIN 766-4"\nedge_', 'stock = "DIN 766-44"\nedge_', "stock", "DIN 766-44"),
    Bad("net's edge stock a number", NET, 'edge_stock = "DIN 766-5"', "edge_stock = 5", "edge_stock", "5"),
    Bad("net's members unknown", NET, 'members = "hanging"', 'members = "straigt"', "members", "did you mean 'straight'"),
    Bad("net without force density", NET, 'force_density = { field = "10 N/m", edge = "40 N/m" }\n', "", "force_density", "is missing", _N),
    Bad("net's force density of nought", NET, '"10 N/m"', '"0 N/m"', "force_density.field", "more than 0"),
    Bad("net's force density without unit", NET, '"10 N/m"', "10", "force_density.field", "no unit"),
    Bad("net's force density a force", NET, '"10 N/m"', '"10 N"', "force_density.field", "force"),
    Bad("net's field forgotten", NET, 'field = "10 N/m", ', "", "force_density.field", "is missing"),
    Bad("net's edge density misspelt", NET, 'edge = "40', 'egde = "40', "force_density.egde", "did you mean 'edge'"),
    Bad("net's node mass under nought", NET, 'node_mass = "40 g"', 'node_mass = "-40 g"', "node_mass", "0 or more"),
    Bad("net's node mass in metres", NET, 'node_mass = "40 g"', 'node_mass = "4 m"', "node_mass", "length"),
    Bad("net's copies of nought", NET, "copies = 1", "copies = 0", "copies", "from 1"),
    Bad("net's key unknown", NET, "copies = 1", "colour = 1", "colour", "is not known"),
    Bad("net's key of a later version", NET, "copies = 1", "groups = 12", "groups", "not solved by this version"),
]  # fmt: skip
