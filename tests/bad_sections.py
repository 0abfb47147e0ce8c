"""What pieces share, wrong in one way each, with the key, the words and the line of the answer."""

from __future__ import annotations

from tests.bad_designs import Bad

SHARED = """\
title = "Bad"
unit  = "mm"

[shop]
temperature = 20
step = "1 mm"
kerf = "3 mm"
cut_tolerance = "2 mm"
spares = 0.05
[site]
temperature = [-10, 20, 35]
support_give = "20 mm"
wind = "500 Pa"
origin = [437250000, 112400000, 0]
[drawing]
unit = "cm"
within = "0.5 mm"
curve = "polyline"
version = "R2010"
sheet = "A3"
[print]
scale = 20
least_wall = "1 mm"
links = "apart"
gap = "0.3 mm"
bed = ["220 mm", "220 mm", "250 mm"]

[support.P1]
at = [437250000, 112400000, 3000]
height = 3000
[fitting.hook]
takes = 32
turns = 1
grip = 5
mass = "0.1 kg"
[material.mine]
density = 1900
strength = "5 MPa"
expansion = 6e-6
source = "weighed"
[stock.chain]
kind = "chain"
wire = 6
pitch = 42
width = 21.6
material = "brass"
expansion = "19e-6 /K"
breaking_load = "12 kN"
certified = false
drag = 1.3
sold = ["30 m", "100 ft"]
source = "the maker's sheet"
[stock.lot]
like = "DIN 763-6"
measured = { links = 11, length = "464 mm" }
[stock.rope]
kind = "rope"
diameter = 8
mass_per_metre = "0.25 kg/m"
area = "24 mm2"
modulus = "90 GPa"
[stock.strand]
construction = "7x19"
diameter = 5
[stock.rod]
kind = "rod"
density = "500 pcf"
diameter = 10
[stock.balls]
kind = "beads"
pitch = 6
mass_per_metre = 0.05
material = "mine"

[[hanging]]
mark = "S1"
from = "P1"
to = [437254000, 112400000, 3000]
stock = "chain"
sag = 600
fittings = { from = "hook" }
"""

FILE_HEAD = 'title = "Bad"'

BAD_FILES = [
    Bad("unit absent", SHARED, 'unit  = "mm"\n', "", "unit", "is missing; state the unit", FILE_HEAD),
    Bad("unit a number", SHARED, 'unit  = "mm"', "unit  = 1", "unit", "give one of"),
    Bad("unit of angle", SHARED, 'unit  = "mm"', 'unit  = "deg"', "unit", "give one of"),
    Bad("title a list", SHARED, '"Bad"', '["Bad"]', "title", "put it in quotes"),
    Bad("title with an escape", SHARED, '"Bad"', '"\\u001b[2J"', "title", "U+001B, which cannot be printed; remove it"),
    Bad("title of no character", SHARED, '"Bad"', '"\\uffff"', "title", "remove it"),
    Bad("table misspelt", SHARED, "[drawing]", "[drawings]", "drawings", "did you mean 'drawing'"),
    Bad("a section twice over", SHARED, "[site]", "[[site]]", "", "write its keys under a header", "[[site]]"),
    Bad("a stock without a name", SHARED, "[stock.lot]", "[stock]", "", "write [stock.NAME]", "like"),
]  # fmt: skip

BAD_SECTIONS = [
    Bad("temperature under nought kelvin", SHARED, "temperature = 20", "temperature = -300", "temperature", "over -273.15"),
    Bad("temperature in metres", SHARED, "temperature = 20", 'temperature = "20 m"', "temperature", "of length"),
    Bad("temperature a list", SHARED, "temperature = 20", "temperature = [20]", "temperature", "is no temperature"),
    Bad("step of nought", SHARED, 'step = "1 mm"', "step = 0", "step", "more than 0"),
    Bad("step in kilograms", SHARED, 'step = "1 mm"', 'step = "1 kg"', "step", "of mass, not of length"),
    Bad("kerf under nought", SHARED, 'kerf = "3 mm"', "kerf = -3", "kerf", "0 or more"),
    Bad("kerf of text", SHARED, 'kerf = "3 mm"', 'kerf = "thin"', "kerf", "write it like"),
    Bad("tolerance under nought", SHARED, 'cut_tolerance = "2 mm"', "cut_tolerance = -2", "cut_tolerance", "0 or more"),
    Bad("tolerance true", SHARED, 'cut_tolerance = "2 mm"', "cut_tolerance = true", "cut_tolerance", "write it like"),
    Bad("spares under nought", SHARED, "spares = 0.05", "spares = -0.05", "spares", "0 or more"),
    Bad("spares in metres", SHARED, "spares = 0.05", 'spares = "5 m"', "spares", "of length, not of ratio"),
    Bad("spares too many", SHARED, "spares = 0.05", "spares = 500", "spares", "at most"),
    Bad("shop's key misspelt", SHARED, "kerf =", "kref =", "kref", "did you mean 'kerf'"),
    Bad("two temperatures", SHARED, "[-10, 20, 35]", "[-10, 35]", "temperature", "coldest, as hung, hottest"),
    Bad("temperatures out of order", SHARED, "[-10, 20, 35]", "[35, 20, -10]", "temperature", "coldest"),
    Bad("one temperature", SHARED, "[-10, 20, 35]", "21", "temperature", "coldest, as hung, hottest"),
    Bad("temperatures with a length", SHARED, "[-10, 20, 35]", '[-10, 20, "35 m"]', "temperature", "of length"),
    Bad("give under nought", SHARED, 'support_give = "20 mm"', "support_give = -20", "support_give", "0 or more"),
    Bad("give in newtons", SHARED, 'support_give = "20 mm"', 'support_give = "20 N"', "support_give", "of force"),
    Bad("wind bare", SHARED, 'wind = "500 Pa"', "wind = 500", "wind", "has no unit; give one of"),
    Bad("wind under nought", SHARED, 'wind = "500 Pa"', 'wind = "-500 Pa"', "wind", "0 or more"),
    Bad("wind in metres a second", SHARED, 'wind = "500 Pa"', 'wind = "30 m/s"', "wind", "no known unit"),
    Bad("origin flat", SHARED, "[437250000, 112400000, 0]", "[437250000, 112400000]", "origin", "give [x, y, z]"),
    Bad("origin of text", SHARED, "[437250000, 112400000, 0]", '"the gate"', "origin", "give [x, y, z]"),
    Bad("origin off the earth", SHARED, "[437250000, 112400000, 0]", "[1e15, 0, 0]", "origin", "look to its unit"),
    Bad("site's key unknown", SHARED, "support_give =", "supports_give =", "supports_give", "did you mean 'support_give'"),
    Bad("drawing's unit unknown", SHARED, 'unit = "cm"', 'unit = "yd"', "unit", "give one of"),
    Bad("within of nought", SHARED, 'within = "0.5 mm"', "within = 0", "within", "0.001 mm or more"),
    Bad("within too fine", SHARED, 'within = "0.5 mm"', 'within = "0.0001 mm"', "within", "0.001 mm or more"),
    Bad("within in degrees", SHARED, 'within = "0.5 mm"', 'within = "0.5 deg"', "within", "of angle, not of length"),
    Bad("curve unknown", SHARED, '"polyline"', '"polylines"', "curve", "did you mean 'polyline'"),
    Bad("curve a number", SHARED, '"polyline"', "1", "curve", "give one of"),
    Bad("version unknown", SHARED, '"R2010"', '"R2000"', "version", "did you mean 'R2010'"),
    Bad("version a number", SHARED, '"R2010"', "12", "version", "give one of"),
    Bad("sheet unknown", SHARED, '"A3"', '"A6"', "sheet", "give one of"),
    Bad("sheet a list", SHARED, '"A3"', '["A3"]', "sheet", "give one of"),
    Bad("drawing's key misspelt", SHARED, "sheet =", "sheets =", "sheets", "did you mean 'sheet'"),
    Bad("scale of nought", SHARED, "scale = 20", "scale = 0", "scale", "give 20 for 1:20"),
    Bad("scale as a ratio", SHARED, "scale = 20", 'scale = "1:20"', "scale", "give 20 for 1:20"),
    Bad("scale under nought", SHARED, "scale = 20", "scale = -20", "scale", "give 20 for 1:20"),
    Bad("scale past all prints", SHARED, "scale = 20", "scale = 20000", "scale", "to 10000"),
    Bad("wall under nought", SHARED, 'least_wall = "1 mm"', "least_wall = -1", "least_wall", "0 or more"),
    Bad("wall in pascals", SHARED, 'least_wall = "1 mm"', 'least_wall = "1 Pa"', "least_wall", "not of length"),
    Bad("links unknown", SHARED, '"apart"', '"appart"', "links", "did you mean 'apart'"),
    Bad("links true", SHARED, '"apart"', "true", "links", "give one of"),
    Bad("gap under nought", SHARED, 'gap = "0.3 mm"', "gap = -0.3", "gap", "0 or more"),
    Bad("gap of text", SHARED, 'gap = "0.3 mm"', 'gap = "small"', "gap", "is no length"),
    Bad("bed of two", SHARED, '["220 mm", "220 mm", "250 mm"]', "[220, 220]", "bed", "give its three sizes"),
    Bad("bed a number", SHARED, '["220 mm", "220 mm", "250 mm"]', "220", "bed", "give its three sizes"),
    Bad("bed of nought", SHARED, '"250 mm"]', "0]", "bed[3]", "more than 0"),
    Bad("print's key misspelt", SHARED, "least_wall =", "least_wal =", "least_wal", "did you mean 'least_wall'"),
]  # fmt: skip

BAD_ENTRIES = [
    Bad("support's place absent", SHARED, "at = [437250000, 112400000, 3000]\n", "", "at", "is missing", "[support.P1]"),
    Bad("support's place flat", SHARED, "at = [437250000, 112400000, 3000]", "at = [437250000, 3000]", "at", "[x, y, z]"),
    Bad("support's place of text", SHARED, "112400000, 3000]\nheight", '112400000, "up"]\nheight', "at", "is no length"),
    Bad("support's height under nought", SHARED, "height = 3000", "height = -3000", "height", "more than 0"),
    Bad("support's height in newtons", SHARED, "height = 3000", 'height = "3 kN"', "height", "of force"),
    Bad("support's key misspelt", SHARED, "height =", "heigth =", "heigth", "did you mean 'height'"),
    Bad("fitting's length absent", SHARED, "takes = 32\n", "", "takes", "is missing", "[fitting.hook]"),
    Bad("fitting's length under nought", SHARED, "takes = 32", "takes = -32", "takes", "0 or more"),
    Bad("fitting's length in grams", SHARED, "takes = 32", 'takes = "32 g"', "takes", "of mass, not of length"),
    Bad("fitting's turns under nought", SHARED, "turns = 1", "turns = -1", "turns", "0 or more"),
    Bad("fitting's turns of text", SHARED, "turns = 1", 'turns = "one"', "turns", "whole number of quarter turns"),
    Bad("fitting's grip under nought", SHARED, "grip = 5", "grip = -5", "grip", "0 or more"),
    Bad("fitting's grip a table", SHARED, "grip = 5", "grip = { a = 1 }", "grip", "is no length"),
    Bad("fitting's mass under nought", SHARED, 'mass = "0.1 kg"', "mass = -0.1", "mass", "0 or more"),
    Bad("fitting's mass in newtons", SHARED, 'mass = "0.1 kg"', 'mass = "1 N"', "mass", "of force, not of mass"),
    Bad("fitting's key misspelt", SHARED, "grip =", "gripp =", "gripp", "did you mean 'grip'"),
    Bad("material without density", SHARED, "density = 1900\n", "", "density", "is missing", "[material.mine]"),
    Bad("density of nought", SHARED, "density = 1900", "density = 0", "density", "more than 0"),
    Bad("density in metres", SHARED, "density = 1900", 'density = "1900 m"', "density", "of length, not of density"),
    Bad("strength bare", SHARED, 'strength = "5 MPa"', "strength = 5", "strength", "has no unit"),
    Bad("strength under nought", SHARED, 'strength = "5 MPa"', 'strength = "-5 MPa"', "strength", "more than 0"),
    Bad("expansion of text", SHARED, "expansion = 6e-6", 'expansion = "little"', "expansion", "is no expansion"),
    Bad("expansion past reason", SHARED, "expansion = 6e-6", "expansion = 6", "expansion", "per kelvin"),
    Bad("material's source a number", SHARED, 'source = "weighed"', "source = 7", "source", "put it in quotes"),
    Bad("material's key misspelt", SHARED, "strength =", "strenght =", "strenght", "did you mean 'strength'"),
]  # fmt: skip

BAD_STOCKS = [
    Bad("kind absent", SHARED, 'kind = "chain"\n', "", "kind", "is missing; give", "[stock.chain]"),
    Bad("kind unknown", SHARED, 'kind = "chain"', 'kind = "chains"', "kind", "did you mean 'chain'"),
    Bad("kind a number", SHARED, 'kind = "chain"', "kind = 1", "kind", "give one of"),
    Bad("kind of another base", SHARED, 'like = "DIN 763-6"', 'like = "DIN 763-6"\nkind = "rope"', "kind", "leave `kind`",
        'kind = "rope"'),
    Bad("wire absent", SHARED, "wire = 6\n", "", "wire", "is missing; give it", "[stock.chain]"),
    Bad("wire of nought", SHARED, "wire = 6", "wire = 0", "wire", "more than 0"),
    Bad("wire in newtons", SHARED, "wire = 6", 'wire = "6 N"', "wire", "of force, not of length"),
    Bad("wire thicker than a link", SHARED, "wire = 6", "wire = 25", "pitch", "give the inside length", "pitch = 42"),
    Bad("pitch absent", SHARED, "pitch = 42\n", "", "pitch", "is missing; give the inside length", "[stock.chain]"),
    Bad("pitch under nought", SHARED, "pitch = 42", "pitch = -42", "pitch", "more than 0"),
    Bad("pitch under two wires", SHARED, "pitch = 42", "pitch = 11", "pitch", "give the inside length"),
    Bad("pitch of a micrometre", SHARED, "pitch = 42", "pitch = 0.001", "pitch", "give the inside length"),
    Bad("pitch twice", SHARED, "pitch = 42", "pitch = 42\nmeasured = { links = 11, length = 462 }", "measured", "just one"),
    Bad("width absent", SHARED, "width = 21.6\n", "", "width", "is missing; give it", "[stock.chain]"),
    Bad("width of two wires", SHARED, "width = 21.6", "width = 12", "width", "give the outside width"),
    Bad("width of text", SHARED, "width = 21.6", 'width = "wide"', "width", "is no length"),
    Bad("stock's material unknown", SHARED, 'material = "brass"', 'material = "bras"', "material", "did you mean 'brass'"),
    Bad("stock's material a number", SHARED, 'material = "brass"', "material = 8500", "material", "give its name"),
    Bad("material and density", SHARED, 'material = "brass"', 'material = "brass"\ndensity = 8500', "density", "just one"),
    Bad("stock's expansion in metres", SHARED, '"19e-6 /K"', '"19 m"', "expansion", "of length, not of expansion"),
    Bad("load of nought", SHARED, 'breaking_load = "12 kN"', "breaking_load = 0", "breaking_load", "more than 0"),
    Bad("load in kilograms", SHARED, 'breaking_load = "12 kN"', 'breaking_load = "1200 kg"', "breaking_load", "of mass, not of force"),
    Bad("certified of text", SHARED, "certified = false", 'certified = "no"', "certified", "give one of them, without quotes"),
    Bad("certified of nothing", SHARED, 'breaking_load = "12 kN"\n', "", "certified", "stands alone", "certified"),
    Bad("drag under nought", SHARED, "drag = 1.3", "drag = -1", "drag", "0 or more"),
    Bad("drag in metres", SHARED, "drag = 1.3", 'drag = "1 m"', "drag", "of length, not of ratio"),
    Bad("sold at nought", SHARED, '["30 m", "100 ft"]', '["30 m", 0]', "sold[2]", "more than 0"),
    Bad("sold in kilograms", SHARED, '["30 m", "100 ft"]', '"30 kg"', "sold", "of mass, not of length"),
    Bad("source a number", SHARED, 'source = "the maker\'s sheet"', "source = 3", "source", "put it in quotes"),
    Bad("source with a bell", SHARED, '"the maker\'s sheet"', '"the\\u0007 sheet"', "source", "remove it"),
    Bad("like unknown", SHARED, 'like = "DIN 763-6"', 'like = "DIN 763-66"', "like", "DIN 763 is listed in"),
    Bad("like a number", SHARED, 'like = "DIN 763-6"', "like = 763", "like", "put it in quotes"),
    Bad("like and construction", SHARED, 'like = "DIN 763-6"', 'like = "DIN 763-6"\nconstruction = "7x7"', "construction",
        "just one"),
    Bad("measured a length", SHARED, '{ links = 11, length = "464 mm" }', '"464 mm"', "measured", "in braces"),
    Bad("measured of no links", SHARED, "links = 11", "links = 0", "measured.links", "from 1"),
    Bad("measured without links", SHARED, "links = 11, ", "", "measured.links", "is missing"),
    Bad("measured without length", SHARED, ', length = "464 mm"', "", "measured.length", "is missing"),
    Bad("measured of no length", SHARED, 'length = "464 mm"', "length = 0", "measured.length", "more than 0"),
    Bad("measured of short links", SHARED, 'length = "464 mm"', "length = 46", "measured", "give the inside length"),
    Bad("measured misspelt", SHARED, "{ links = 11", "{ link = 11", "measured.link", "did you mean 'links'"),
    Bad("rope's mass absent", SHARED, 'mass_per_metre = "0.25 kg/m"\n', "", "mass_per_metre", "is missing", "[stock.rope]"),
    Bad("rope's mass of nought", SHARED, '"0.25 kg/m"', '"0 kg/m"', "mass_per_metre", "more than 0"),
    Bad("rope's mass in grams", SHARED, '"0.25 kg/m"', '"250 g"', "mass_per_metre", "of mass, not of mass per length"),
    Bad("rope's diameter of text", SHARED, "diameter = 8", 'diameter = "8 ounces"', "diameter", "no known unit"),
    Bad("rope's diameter of nought", SHARED, "diameter = 8", "diameter = 0", "diameter", "more than 0"),
    Bad("area absent", SHARED, 'area = "24 mm2"\n', "", "area", "is missing; `modulus` counts", "[stock.rope]"),
    Bad("area bare", SHARED, '"24 mm2"', "24", "area", "has no unit; give one of"),
    Bad("area in metres", SHARED, '"24 mm2"', '"24 mm"', "area", "of length, not of area"),
    Bad("modulus bare", SHARED, '"90 GPa"', "90", "modulus", "has no unit; give one of"),
    Bad("modulus of nought", SHARED, '"90 GPa"', '"0 GPa"', "modulus", "more than 0"),
    Bad("modulus in newtons", SHARED, '"90 GPa"', '"90 kN"', "modulus", "of force, not of modulus"),
    Bad("construction unknown", SHARED, '"7x19"', '"8x25"', "construction", "give one like"),
    Bad("construction without core", SHARED, '"7x19"', '"6x19"', "construction", "write '6x19 FC' or '6x19 IWRC'"),
    Bad("construction a number", SHARED, '"7x19"', "719", "construction", "put it in quotes"),
    Bad("strand without diameter", SHARED, "diameter = 5\n", "", "diameter", "is missing", "[stock.strand]"),
    Bad("rod's density of nought", SHARED, '"500 pcf"', '"0 pcf"', "density", "more than 0"),
    Bad("rod's density in pascals", SHARED, '"500 pcf"', '"500 psf"', "density", "not of density"),
    Bad("rod of no size", SHARED, "diameter = 10\n", "", "diameter", "is missing; give it", "[stock.rod]"),
    Bad("balls without pitch", SHARED, "pitch = 6\n", "", "pitch", "is missing; measure", "[stock.balls]"),
    Bad("balls without mass", SHARED, "mass_per_metre = 0.05\n", "", "mass_per_metre", "weigh a length", "[stock.balls]"),
    Bad("stock's key misspelt", SHARED, "width =", "widht =", "widht", "did you mean 'width'"),
    Bad("stock's name", SHARED, "[stock.lot]", '[stock."=1+1"]', "", "use letters, digits", '[stock."=1+1"]'),
]  # fmt: skip

BAD = [*BAD_FILES, *BAD_SECTIONS, *BAD_ENTRIES, *BAD_STOCKS]
