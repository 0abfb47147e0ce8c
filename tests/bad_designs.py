"""Designs that are wrong in one way each: the text to change, and the line, key and words of the answer."""

from __future__ import annotations

from dataclasses import dataclass

HANGING = """\
title = "Bad"
unit  = "mm"

[support.A]
at     = [0, 0, 3000]
height = 3000
[fitting.shackle]
takes = 32
turns = 1
grip  = 0
mass  = "0.1 kg"
[stock.mine]
kind  = "chain"
wire  = 6
pitch = 18.5
width = 20.4

[[hanging]]
mark = "S1"
from = "A"
to   = [4000, 0, 3000]
stock = "mine"
sag  = 600
parity = "any"
round = "nearest"
copies = 2
fittings = { from = "shackle", to = ["shackle", 48] }
clear = { above = [[0, 0], [4000, -120]], at_least = 1500 }
"""

RUN = """\
title = "Bad"
unit  = "mm"

[support.A]
at = [0, 0, 3000]
[support.B]
at = [2000, 0, 3000]

[[run]]
mark = "R1"
supports = ["A", "B", [4000, 500, 2900]]
over = "fixed"
stock = "DIN 763-6"
sag  = 300
parity = "odd"
round = "nearest"
copies = 1
fittings = { from = 20 }
clear = { above = [[0, 0], [4000, 0]], at_least = 1000 }
bays = [{ bay = 2, sag = 350, parity = "any", round = "up", fittings = { to = 30 } }]
"""


@dataclass(frozen=True)
class Bad:
    """One wrong design: `old` in `base` becomes `new`; the answer names `key` and holds `words`, on the line of `at`.

    `at` is the start of the line that is to be named; the changed line itself where it is left out.
    """

    name: str
    base: str
    old: str
    new: str
    key: str
    words: str
    at: str = ""

    @property
    def text(self) -> str:
        """The design's text."""
        assert self.base.count(self.old) >= 1, self.name
        return self.base.replace(self.old, self.new, 1)

    @property
    def line(self) -> int:
        """The line that the answer is to name, from 1."""
        lines = self.text.splitlines()
        start = self.at or next(
            (new for old, new in zip(self.base.splitlines(), lines, strict=False) if old != new), lines[0]
        )
        return next(number for number, line in enumerate(lines, 1) if line.startswith(start))


HANGING_HEADER = "[[hanging]]"
RUN_HEADER = "[[run]]"

BAD_HANGINGS = [
    Bad("mark absent", HANGING, 'mark = "S1"\n', "", "mark", "is missing", HANGING_HEADER),
    Bad("mark a number", HANGING, 'mark = "S1"', "mark = 1", "mark", "is no text"),
    Bad("mark with a path", HANGING, 'mark = "S1"', 'mark = "../S1"', "mark", "is no mark"),
    Bad("mark empty", HANGING, 'mark = "S1"', 'mark = ""', "mark", "is no mark"),
    Bad("mark of dots", HANGING, 'mark = "S1"', 'mark = ".."', "mark", "is no mark"),
    Bad("mark too long", HANGING, 'mark = "S1"', f'mark = "{"S" * 41}"', "mark", "at most 40"),
    Bad("from absent", HANGING, 'from = "A"\n', "", "from", "is missing", HANGING_HEADER),
    Bad("from unknown", HANGING, 'from = "A"', 'from = "AA"', "from", "there is no support"),
    Bad("from a number", HANGING, 'from = "A"', "from = 7", "from", "is no support"),
    Bad("from of two numbers", HANGING, 'from = "A"', "from = [0, 0]", "from", "is no point"),
    Bad("from with a mass", HANGING, 'from = "A"', 'from = [0, 0, "3 kg"]', "from", "mass"),
    Bad("to absent", HANGING, "to   = [4000, 0, 3000]\n", "", "to", "is missing", HANGING_HEADER),
    Bad("to of text", HANGING, "to   = [4000, 0, 3000]", 'to   = [4000, 0, "high"]', "to", "is no length"),
    Bad("to at from", HANGING, "to   = [4000, 0, 3000]", "to   = [0, 0, 3000]", "to", "the same point"),
    Bad("stock absent", HANGING, 'stock = "mine"\n', "", "stock", "is missing", HANGING_HEADER),
    Bad("stock unknown", HANGING, 'stock = "mine"', 'stock = "DIN 763-9999"', "stock", "DIN 763-9999"),
    Bad("stock a number", HANGING, 'stock = "mine"', "stock = 6", "stock", "6"),
    Bad("no fact", HANGING, "sag  = 600\n", "", "length", "is missing; give one of", HANGING_HEADER),
    Bad("two facts", HANGING, "sag  = 600", "sag  = 600\nslack = 1.1", "slack", "just one"),
    Bad("sag of text", HANGING, "sag  = 600", 'sag  = "deep"', "sag", "is no length"),
    Bad("sag with a comma", HANGING, "sag  = 600", 'sag  = "0,6 m"', "sag", "0.6 m"),
    Bad("sag in newtons", HANGING, "sag  = 600", 'sag  = "600 N"', "sag", "force"),
    Bad("sag of nought", HANGING, "sag  = 600", "sag  = 0", "sag", "more than 0"),
    Bad("sag under nought", HANGING, "sag  = 600", "sag  = -600", "sag", "more than 0"),
    Bad("sag true", HANGING, "sag  = 600", "sag  = true", "sag", "is no length"),
    Bad("sag infinite", HANGING, "sag  = 600", "sag  = inf", "sag", "inf"),
    Bad("sag a list", HANGING, "sag  = 600", "sag  = [600]", "sag", "is no length"),
    Bad("length under the chord", HANGING, "sag  = 600", "length = 3900", "length", "3900 mm is shorter than the 4000 mm"),
    Bad("length of the chord", HANGING, "sag  = 600", 'length = "4 m"', "length", "exactly the 4000 mm"),
    Bad("length in kilograms", HANGING, "sag  = 600", 'length = "4 kg"', "length", "mass"),
    Bad("links too few", HANGING, "sag  = 600", "links = 200", "links", "give at least 211"),
    Bad("links a fraction", HANGING, "sag  = 600", "links = 220.5", "links", "whole number"),
    Bad("links of nought", HANGING, "sag  = 600", "links = 0", "links", "whole number from 1"),
    Bad("links against parity", HANGING, 'sag  = 600\nparity = "any"', 'links = 230\nparity = "odd"', "links", "is not odd"),
    Bad("links of rope", HANGING, 'stock = "mine"\nsag  = 600', 'stock = "7x19-5"\nlinks = 40', "links", "has no links", "links"),
    Bad("slack of one", HANGING, "sag  = 600", "slack = 1", "slack", "more than 1"),
    Bad("slack with a unit", HANGING, "sag  = 600", 'slack = "1.1 m"', "slack", "1.1 m"),
    Bad("lowest over the support", HANGING, "sag  = 600", "lowest = 3200", "lowest", "not under the lower support"),
    Bad("lowest of text", HANGING, "sag  = 600", 'lowest = "low"', "lowest", "is no length"),
    Bad("pull of nought", HANGING, "sag  = 600", "pull = 0", "pull", "more than 0"),
    Bad("pull in metres", HANGING, "sag  = 600", 'pull = "3 m"', "pull", "length"),
    Bad("parity unknown", HANGING, 'parity = "any"', 'parity = "od"', "parity", "did you mean 'odd'"),
    Bad("parity a number", HANGING, 'parity = "any"', "parity = 1", "parity", "give one of"),
    Bad("round unknown", HANGING, 'round = "nearest"', 'round = "nearst"', "round", "did you mean 'nearest'"),
    Bad(
        "round down out of reach", HANGING, 'sag  = 600\nparity = "any"\nround = "nearest"',
        'length = 4001\nparity = "any"\nround = "down"', "round", "does not reach",
        'round = "down"',
    ),
    Bad("copies of nought", HANGING, "copies = 2", "copies = 0", "copies", "from 1"),
    Bad("copies a fraction", HANGING, "copies = 2", "copies = 1.5", "copies", "whole number"),
    Bad("fitting unknown", HANGING, 'from = "shackle", to', 'from = "shakle", to', "fittings.from", "did you mean 'shackle'"),
    Bad("fittings a text", HANGING, 'fittings = { from = "shackle", to = ["shackle", 48] }', 'fittings = "shackle"', "fittings", "table"),
    Bad("fittings misspelt end", HANGING, "to = [\"shackle\", 48] }", "too = 48 }", "fittings.too", "did you mean 'to'"),
    Bad("fitting under nought", HANGING, '["shackle", 48]', '["shackle", -48]', "fittings.to", "0 or more"),
    Bad("clear without ground", HANGING, "above = [[0, 0], [4000, -120]], ", "", "clear.above", "is missing"),
    Bad("ground not in order", HANGING, "[[0, 0], [4000, -120]]", "[[4000, 0], [0, -120]]", "clear.above", "do not increase"),
    Bad("ground of one point", HANGING, "[[0, 0], [4000, -120]]", "[[0, 0]]", "clear.above", "at least two"),
    Bad("clearance under nought", HANGING, "at_least = 1500", "at_least = -1", "clear.at_least", "0 or more"),
    Bad("key unknown", HANGING, "copies = 2", "copys = 2", "copys", "did you mean 'copies'"),
    Bad("support's point absent", HANGING, "at     = [0, 0, 3000]\n", "", "at", "is missing", "[support.A]"),
    Bad("support's height of nought", HANGING, "height = 3000", "height = 0", "height", "more than 0"),
    Bad("support's key unknown", HANGING, "height = 3000", "hight = 3000", "hight", "did you mean 'height'"),
    Bad("fitting takes nothing", HANGING, "takes = 32\n", "", "takes", "is missing", "[fitting.shackle]"),
    Bad("fitting's turns a fraction", HANGING, "turns = 1", "turns = 0.5", "turns", "whole number"),
    Bad("fitting's grip under nought", HANGING, "grip  = 0", "grip  = -1", "grip", "0 or more"),
    Bad("fitting's mass in metres", HANGING, 'mass  = "0.1 kg"', 'mass  = "0.1 m"', "mass", "length"),
    Bad("unit absent", HANGING, 'unit  = "mm"\n', "", "unit", "is missing", 'title = "Bad"'),
    Bad("unit unknown", HANGING, 'unit  = "mm"', 'unit  = "mmm"', "unit", "did you mean 'mm'"),
    Bad("title a number", HANGING, 'title = "Bad"', "title = 5", "title", "is no text"),
    Bad("table unknown", HANGING, "[[hanging]]", "[[hangings]]", "hangings", "did you mean 'hanging'"),
    Bad("one bracket", HANGING, "[[hanging]]", "[hanging]", "", "two brackets"),
]  # fmt: skip

BAD_RUNS = [
    Bad("supports absent", RUN, 'supports = ["A", "B", [4000, 500, 2900]]\n', "", "supports", "is missing", RUN_HEADER),
    Bad("one support", RUN, '["A", "B", [4000, 500, 2900]]', '["A"]', "supports", "at least two"),
    Bad("supports a name", RUN, '["A", "B", [4000, 500, 2900]]', '"A"', "supports", "list"),
    Bad("support unknown", RUN, '["A", "B",', '["A", "C",', "supports[2]", "there is no support"),
    Bad("support twice running", RUN, '["A", "B",', '["A", "A",', "supports[2]", "the same point"),
    Bad("over unknown", RUN, 'over = "fixed"', 'over = "fixd"', "over", "did you mean 'fixed'"),
    Bad("facts too few", RUN, "sag  = 300", "slack = [1.1, 1.2, 1.3]", "slack", "3 values for 2 bays"),
    Bad("facts none", RUN, "sag  = 300", "sag  = []", "sag", "empty list"),
    Bad("no fact", RUN, "sag  = 300\n", "", "length", "is missing; give one of", RUN_HEADER),
    Bad("a fact of text", RUN, "sag  = 300", 'sag  = [300, "x"]', "sag", "is no length"),
    Bad("too short in one bay", RUN, "sag  = 300", "length = [1900, 2100]", "length[1]", "bay 1", "length ="),
    Bad("bay out of range", RUN, "bay = 2,", "bay = 3,", "bays", "there is no bay 3"),
    Bad("bay of nought", RUN, "bay = 2,", "bay = 0,", "bays[1].bay", "from 1"),
    Bad("bay without number", RUN, "bay = 2, ", "", "bays[1].bay", "is missing"),
    Bad("bay with two facts", RUN, "sag = 350,", "sag = 350, slack = 1.2,", "bays[1].slack", "just one"),
    Bad("bay's sag under nought", RUN, "sag = 350", "sag = -350", "bays[1].sag", "more than 0"),
    Bad("bay's parity unknown", RUN, 'sag = 350, parity = "any"', 'sag = 350, parity = "all"', "bays[1].parity", "give one of"),
    Bad("bay's fitting unknown", RUN, "fittings = { to = 30 }", 'fittings = { to = "ring" }', "bays[1].fittings.to", "there is no fitting"),
    Bad("bay's key unknown", RUN, "bay = 2,", "bay = 2, color = 1,", "bays[1].color", "is not known"),
    Bad("friction of a tied run", RUN, 'over = "fixed"', 'over = "fixed"\nfriction = 0.1', "friction", "give it with `over ="),
]  # fmt: skip
