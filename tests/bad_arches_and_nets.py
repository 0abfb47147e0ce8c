"""Arches and nets that are wrong in one way each, with the key, the words and the line of the answer."""

from __future__ import annotations

from tests.bad_designs import Bad

ARCH = """\
title = "Bad"
unit  = "mm"

[support.A]
at = [0, 0, 1000]

[[arch]]
mark = "A1"
from = "A"
to   = [2000, 0, 1000]
rise = 1500
face = "axis"
shape = "catenary"
curve = "axis"
thickness = 200
depth = 400
foot = "level"
section = "rectangle"
material = "brick"
blocks = 21
joint = 8
copies = 2
setting_out = { step = 100, widths_at = [500] }
"""

NET = """\
title = "Bad"
unit  = "mm"

[support.NE]
at = [3000, 3000, 3200]

[[net]]
mark = "N1"
pattern = "square"
outline = [[0, 0, 3000], [3000, 0, 3000], [3000, 3000, 3200], [0, 3000, 3000]]
divisions = [4, 3]
anchors = [[0, 0, 3000], [3000, 0, 3000], "NE", [0, 3000, 3000]]
stock = "DIN 763-6"
edge_stock = "DIN 763-8"
members = "hanging"
force_density = { field = "50 N/m", edge = "200 N/m" }
node_mass = "40 g"
copies = 1
"""

ARCH_HEADER = "[[arch]]"
NET_HEADER = "[[net]]"
ALL_ROUND = '[[0, 0, 3000], [3000, 0, 3000], "NE", [0, 3000, 3000]]'
OUTLINE = "[[0, 0, 3000], [3000, 0, 3000], [3000, 3000, 3200], [0, 3000, 3000]]"

BAD_ARCHES = [
    Bad("mark absent", ARCH, 'mark = "A1"\n', "", "mark", "is missing", ARCH_HEADER),
    Bad("mark a list", ARCH, 'mark = "A1"', 'mark = ["A1"]', "mark", "is no text"),
    Bad("mark with a path", ARCH, 'mark = "A1"', 'mark = "a/../b"', "mark", "is no mark"),
    Bad("from absent", ARCH, 'from = "A"\n', "", "from", "is missing", ARCH_HEADER),
    Bad("from unknown", ARCH, 'from = "A"', 'from = "B"', "from", "add it as [support.B]"),
    Bad("from flat", ARCH, 'from = "A"', "from = [0, 0]", "from", "give [x, y, z]"),
    Bad("to absent", ARCH, "to   = [2000, 0, 1000]\n", "", "to", "is missing", ARCH_HEADER),
    Bad("to in kilograms", ARCH, "to   = [2000, 0, 1000]", 'to   = ["2 kg", 0, 1000]', "to", "of mass, not of length"),
    Bad("to at from", ARCH, "to   = [2000, 0, 1000]", "to   = [0, 0, 1000]", "to", "two springings apart on plan"),
    Bad("to over from", ARCH, "to   = [2000, 0, 1000]", "to   = [0, 0, 2000]", "to", "two springings apart on plan"),
    Bad("no fact", ARCH, "rise = 1500\n", "", "rise", "give one of rise, length, thrust, through", ARCH_HEADER),
    Bad("two facts", ARCH, "rise = 1500", "rise = 1500\nlength = 4000", "length", "give just one of them"),
    Bad("rise of nought", ARCH, "rise = 1500", "rise = 0", "rise", "more than 0"),
    Bad("rise under nought", ARCH, "rise = 1500", "rise = -1500", "rise", "more than 0"),
    Bad("rise in newtons", ARCH, "rise = 1500", 'rise = "1 kN"', "rise", "of force, not of length"),
    Bad("rise of text", ARCH, "rise = 1500", 'rise = "tall"', "rise", "is no length"),
    Bad("rise under a springing", ARCH, "to   = [2000, 0, 1000]", "to   = [2000, 0, 2600]", "rise",
        "give more than 1600 mm", "rise"),
    Bad("rise too high", ARCH, "rise = 1500", 'rise = "3 km"', "rise", "give less"),
    Bad("rise too flat", ARCH, "rise = 1500", "rise = 0.0001", "rise", "give more of a curve"),
    Bad("rise too flat for its feet", ARCH, "rise = 1500", "rise = 40", "foot", 'give foot = "radial", more rise', "foot"),
    Bad("rise too steep", ARCH, "to   = [2000, 0, 1000]", "to   = [0.1, 0, 1000]", "rise", "give less", "rise"),
    Bad("length of the chord", ARCH, "rise = 1500", "length = 2000", "length", "give more than 2000 mm"),
    Bad("length in area", ARCH, "rise = 1500", 'length = "4 m2"', "length", "of area, not of length"),
    Bad("thrust of nought", ARCH, "rise = 1500", "thrust = 0", "thrust", "more than 0"),
    Bad("thrust in metres", ARCH, "rise = 1500", 'thrust = "2 m"', "thrust", "of length, not of force"),
    Bad("thrust too small", ARCH, "rise = 1500", 'thrust = "1 N"', "thrust", "give more"),
    Bad("thrust too great", ARCH, "rise = 1500", 'thrust = "900 GN"', "thrust", "no known unit of force"),
    Bad("thrust beyond all", ARCH, "rise = 1500", "thrust = 1e12", "thrust", "too flat"),
    Bad("through of one", ARCH, "rise = 1500", "through = [1000]", "through", "give [distance on plan"),
    Bad("through a number", ARCH, "rise = 1500", "through = 2500", "through", "give [distance on plan"),
    Bad("through a springing", ARCH, "rise = 1500", "through = [0, 2000]", "through", "give one at over 0"),
    Bad("through past the span", ARCH, "rise = 1500", "through = [2100, 2000]", "through", "under 2000 mm"),
    Bad("through under the chord", ARCH, "rise = 1500", "through = [1000, 900]", "through", "give more than 0 mm there"),
    Bad("through off the plane", ARCH, "rise = 1500", "through = [1000, 9, 2000]", "through", "give a point in it"),
    Bad("face unknown", ARCH, 'face = "axis"', 'face = "intrado"', "face", "did you mean 'intrados'"),
    Bad("face a number", ARCH, 'face = "axis"', "face = 1", "face", "give one of"),
    Bad("shape unknown", ARCH, 'shape = "catenary"', 'shape = "catenery"', "shape", "did you mean 'catenary'"),
    Bad("shape not built", ARCH, 'shape = "catenary"', 'shape = "ellipse"', "shape", 'give "catenary"'),
    Bad("curve unknown", ARCH, 'curve = "axis"', 'curve = "middle"', "curve", "give one of"),
    Bad("thickness absent", ARCH, "thickness = 200\n", "", "thickness", "is missing", ARCH_HEADER),
    Bad("thickness of nought", ARCH, "thickness = 200", "thickness = 0", "thickness", "more than 0"),
    Bad("thickness of text", ARCH, "thickness = 200", 'thickness = "thick"', "thickness", "is no length"),
    Bad("thickness in grams", ARCH, "thickness = 200", 'thickness = "200 g"', "thickness", "of mass, not of length"),
    Bad("thickness next to nothing", ARCH, "thickness = 200", "thickness = 0.00001", "thickness", "give from 0.002 mm"),
    Bad("intrados folding", ARCH, "thickness = 200", "thickness = 1000", "thickness", "folds the intrados"),
    Bad("depth absent", ARCH, "depth = 400\n", "", "depth", "is missing", ARCH_HEADER),
    Bad("depth under nought", ARCH, "depth = 400", "depth = -400", "depth", "more than 0"),
    Bad("depth a list", ARCH, "depth = 400", "depth = [400, 500]", "depth", "is no length"),
    Bad("foot unknown", ARCH, 'foot = "level"', 'foot = "lever"', "foot", "did you mean 'level'"),
    Bad("foot true", ARCH, 'foot = "level"', "foot = true", "foot", "give one of"),
    Bad("section unknown", ARCH, 'section = "rectangle"', 'section = "rectangel"', "section", "did you mean 'rectangle'"),
    Bad("material absent", ARCH, 'material = "brick"\n', "", "material", "is missing", ARCH_HEADER),
    Bad("material unknown", ARCH, 'material = "brick"', 'material = "brik"', "material", "did you mean 'brick'"),
    Bad("material a number", ARCH, 'material = "brick"', "material = 1900", "material", "give its name"),
    Bad("blocks one", ARCH, "blocks = 21", "blocks = 1", "blocks", "give 2 to 10000"),
    Bad("blocks of nought", ARCH, "blocks = 21", "blocks = 0", "blocks", "give a whole number from 1"),
    Bad("blocks a fraction", ARCH, "blocks = 21", "blocks = 20.5", "blocks", "give a whole number"),
    Bad("blocks too many", ARCH, "blocks = 21", "blocks = 10001", "blocks", "give 2 to 10000"),
    Bad("joint without blocks", ARCH, "blocks = 21\n", "", "joint", "give blocks, or leave it out", "joint"),
    Bad("joint under nought", ARCH, "joint = 8", "joint = -1", "joint", "0 or more"),
    Bad("joint wider than a block", ARCH, "joint = 8", "joint = 190", "joint", "give thinner joints or fewer blocks"),
    Bad("joint in degrees", ARCH, "joint = 8", 'joint = "8 deg"', "joint", "of angle, not of length"),
    Bad("copies of nought", ARCH, "copies = 2", "copies = 0", "copies", "from 1"),
    Bad("copies of text", ARCH, "copies = 2", 'copies = "2"', "copies", "give a whole number"),
    Bad("setting out a number", ARCH, "{ step = 100, widths_at = [500] }", "100", "setting_out", "in braces"),
    Bad("setting out misspelt", ARCH, "step = 100", "stepp = 100", "setting_out.stepp", "did you mean 'step'"),
    Bad("setting out of no step", ARCH, "step = 100", "step = 0", "setting_out.step", "more than 0"),
    Bad("setting out too fine", ARCH, "step = 100", "step = 0.001", "setting_out.step", "give a longer step"),
    Bad("a width under nought", ARCH, "[500]", "[500, -500]", "setting_out.widths_at[2]", "0 or more"),
    Bad("widths at a number", ARCH, "[500]", "500", "setting_out.widths_at", "put it in brackets"),
    Bad("key unknown", ARCH, "depth = 400", "depth = 400\nheight = 3", "height", "is not known"),
    Bad("key misspelt", ARCH, "thickness = 200", "thicknes = 200", "thicknes", "did you mean 'thickness'"),
]  # fmt: skip

BAD_NETS = [
    Bad("mark absent", NET, 'mark = "N1"\n', "", "mark", "is missing", NET_HEADER),
    Bad("mark too long", NET, 'mark = "N1"', f'mark = "{"N" * 41}"', "mark", "at most 40"),
    Bad("pattern unknown", NET, 'pattern = "square"', 'pattern = "sqare"', "pattern", "did you mean 'square'"),
    Bad("pattern a number", NET, 'pattern = "square"', "pattern = 4", "pattern", 'give "square"'),
    Bad("outline absent", NET, f"outline = {OUTLINE}\n", "", "outline", "is missing", NET_HEADER),
    Bad("outline of text", NET, OUTLINE, '"court"', "outline", "put it in brackets"),
    Bad("outline with a number", NET, ", [0, 3000, 3000]]\ndiv", ", 3000]\ndiv", "outline[4]", "give [x, y, z]"),
    Bad("outline flat", NET, "[3000, 3000, 3200], [0", "[3000, 3000], [0", "outline[3]", "give [x, y, z]"),
    Bad("outline in seconds", NET, "[[0, 0, 3000], [3000, 0", '[["0 s", 0, 3000], [3000, 0', "outline[1]", "no known unit"),
    Bad("outline of three corners", NET, ", [0, 3000, 3000]]\ndiv", "]\ndiv", "outline", "give the four"),
    Bad("outline crossing itself", NET, OUTLINE, "[[0, 0, 3], [3000, 0, 3], [0, 3000, 3], [3000, 3000, 3]]", "outline",
        "give the corners in order"),
    Bad("outline with an inward corner", NET, OUTLINE, "[[0, 0, 3], [3000, 0, 3], [900, 900, 3], [0, 3000, 3]]", "outline",
        "give four corners that point outward"),
    Bad("outline on a line", NET, OUTLINE, "[[0, 0, 3], [1000, 0, 3], [2000, 0, 3], [3000, 0, 3]]", "outline",
        "give four corners round one"),
    Bad("outline with a corner twice", NET, OUTLINE, "[[0, 0, 3], [3000, 0, 3], [3000, 0, 9], [0, 3000, 3]]", "outline",
        "move one"),
    Bad("no divisions", NET, "divisions = [4, 3]\n", "", "spacing", "give one of spacing, divisions", NET_HEADER),
    Bad("both", NET, "divisions = [4, 3]", "divisions = [4, 3]\nspacing = 500", "spacing", "give just one of them"),
    Bad("divisions of three", NET, "[4, 3]", "[4, 3, 2]", "divisions", "give a whole number, or two"),
    Bad("divisions of nought", NET, "[4, 3]", "[4, 0]", "divisions", "from 1"),
    Bad("divisions a fraction", NET, "[4, 3]", "4.5", "divisions", "give a whole number"),
    Bad("divisions of text", NET, "[4, 3]", '"4 by 3"', "divisions", "give a whole number"),
    Bad("divisions too many", NET, "[4, 3]", "[2000, 2000]", "divisions", "give a coarser net"),
    Bad("spacing of nought", NET, "divisions = [4, 3]", "spacing = 0", "spacing", "more than 0"),
    Bad("spacing larger than the outline", NET, "divisions = [4, 3]", "spacing = 3001", "spacing", "at most that"),
    Bad("spacing too fine", NET, "divisions = [4, 3]", "spacing = 1", "spacing", "give a coarser net"),
    Bad("spacing in newtons", NET, "divisions = [4, 3]", 'spacing = "5 N"', "spacing", "of force, not of length"),
    Bad("anchors absent", NET, f"anchors = {ALL_ROUND}\n", "", "anchors", "is missing", NET_HEADER),
    Bad("anchors misspelt", NET, ALL_ROUND, '"corner"', "anchors", "did you mean 'corners'"),
    Bad("anchors none", NET, ALL_ROUND, "[]", "anchors", "holds nothing; give"),
    Bad("anchors true", NET, ALL_ROUND, "true", "anchors", "holds nothing; give"),
    Bad("anchor unknown", NET, '"NE"', '"NW"', "anchors[3]", "there is no support"),
    Bad("anchor flat", NET, "[0, 3000, 3000]]\nstock", "[0, 3000]]\nstock", "anchors[4]", "is no point"),
    Bad("anchor off the net", NET, "[0, 3000, 3000]]\nstock", "[0, 4000, 3000]]\nstock", "anchors[4]", "move it to a node",
        "anchors"),
    Bad("anchor between nodes", NET, '"NE"', "[2625, 2500, 3000]", "anchors[3]", "move it to a node", "anchors"),
    Bad("anchor twice", NET, '"NE"', "[10, 10, 3000]", "anchors[3]", "leave one out", "anchors"),
    Bad("anchors one", NET, ALL_ROUND, "[[0, 0, 3000]]", "anchors", "give at least three, not in one line"),
    Bad("anchors on a line", NET, ALL_ROUND, "[[0, 0, 3000], [750, 0, 3000], [3000, 0, 3100]]", "anchors", "not in one line"),
    Bad("corners without members", NET, f'{ALL_ROUND}\nstock = "DIN 763-6"\nedge_stock = "DIN 763-8"',
        '"corners"\nstock = "DIN 763-6"\nedge_stock = "none"', "anchors", 'give "edges"', "anchors"),
    Bad("held by nothing", NET, f'[4, 3]\nanchors = {ALL_ROUND}\nstock = "DIN 763-6"\nedge_stock = "DIN 763-8"',
        '[1, 3]\nanchors = [[0, 1000, 3000]]\nstock = "DIN 763-6"\nedge_stock = "none"', "anchors", "add an anchor there",
        "anchors"),
    Bad("stock absent", NET, 'stock = "DIN 763-6"\n', "", "stock", "is missing", NET_HEADER),
    Bad("stock unknown", NET, '"DIN 763-6"', '"DIN 763-66"', "stock", "DIN 763 is listed in"),
    Bad("stock a number", NET, '"DIN 763-6"', "6", "stock", "give its name in quotes"),
    Bad("edge stock unknown", NET, '"DIN 763-8"', '"7x19"', "edge_stock", "gives no diameter; write it"),
    Bad("edge stock a list", NET, '"DIN 763-8"', '["none"]', "edge_stock", "give its name in quotes"),
    Bad("members unknown", NET, 'members = "hanging"', 'members = "hang"', "members", "did you mean 'hanging'"),
    Bad("members a number", NET, 'members = "hanging"', "members = 1", "members", "give one of"),
    Bad("densities absent", NET, 'force_density = { field = "50 N/m", edge = "200 N/m" }\n', "", "force_density",
        "is missing", NET_HEADER),
    Bad("densities a number", NET, '{ field = "50 N/m", edge = "200 N/m" }', "50", "force_density", "in braces"),
    Bad("field absent", NET, 'field = "50 N/m", ', "", "force_density.field", "is missing"),
    Bad("field misspelt", NET, "field =", "feild =", "force_density.feild", "did you mean 'field'"),
    Bad("field without a unit", NET, '"50 N/m"', "50", "force_density.field", 'like "50 N/m"'),
    Bad("field of nought", NET, '"50 N/m"', '"0 N/m"', "force_density.field", "more than 0"),
    Bad("field in newtons", NET, '"50 N/m"', '"50 N"', "force_density.field", "of force, not of force density"),
    Bad("field too small", NET, '"50 N/m"', '"0.3 N/m"', "force_density", "give more"),
    Bad("edge under nought", NET, '"200 N/m"', '"-200 N/m"', "force_density.edge", "more than 0"),
    Bad("mass under nought", NET, '"40 g"', '"-40 g"', "node_mass", "0 or more"),
    Bad("mass in newtons", NET, '"40 g"', '"4 N"', "node_mass", "of force, not of mass"),
    Bad("mass of text", NET, '"40 g"', '"heavy"', "node_mass", "is no mass"),
    Bad("copies of nought", NET, "copies = 1", "copies = 0", "copies", "from 1"),
    Bad("copies of too many members", NET, "copies = 1", "copies = 100000", "stock", "give a longer pitch", "stock"),
    Bad("key unknown", NET, "copies = 1", "copies = 1\nsize = 3", "size", "is not known", "size"),
    Bad("key misspelt", NET, "anchors =", "anchor =", "anchor", "did you mean 'anchors'"),
]  # fmt: skip
