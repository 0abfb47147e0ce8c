"""Classical constants, two-branched catenaries and hard numerical cases, through the public interface."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache, partial
from math import degrees, exp

import pytest
from scipy.optimize import minimize_scalar

from geom.hang.catenary import Hang, from_excess, from_length, from_parameter, from_sag
from tests.published import Published

LAMB = 'H. Lamb, "Mechanics", Encyclopaedia Britannica, 11th ed.'
OEIS = "On-Line Encyclopedia of Integer Sequences, A085984 and A033259"
CLASSIC = "least end pull of a level cable, u tanh u = 1; derived"
PEGS = "S. L. Loney, chain over two level smooth pegs, L = 2c exp(d/2c); from memory, digits derived"
STRETCH = "sinh u / u = k; derived"
SHALLOW = "level member of slack ratio eps; derived"
PLUMB = "near vertical members, drop 1, length 2; derived"
RISE = "(cosh u - 1)/2u = rise/span; derived"
CLASSICAL = "y = a cosh(x/a), y^2 = a^2 + s^2, T = w y, radius y^2/a; derived"
CATENOID = "catenoid between two rings of radius 1 a distance 1 apart; derived"
FLOOR = "cable touching the floor, L = sqrt(h^2 + 2hc), x = c acosh(1 + h/c); derived"
LEVEL = "level chain, length 1.2, span 1; derived"


@cache
def _least_end_pull() -> Hang:
    """Find the level member of least end pull over a unit span by search, not by u tanh u = 1."""
    found = minimize_scalar(
        lambda u: float(from_parameter(1.0, 0.0, 0.5 / u).pulls(1.0).at_to), bounds=(0.5, 3.0), options={"xatol": 1e-9}
    )
    return from_parameter(1.0, 0.0, 0.5 / float(found.x))


def _end() -> float:
    return float(_least_end_pull().pulls(1.0).at_to)


def _neck(neck: float) -> object:
    """Give how far from its axis the catenoid of a neck meets the rings."""
    hang = from_parameter(1.0, 0.0, neck)
    return hang.parameter + hang.sag


def _peg_chain(u: float) -> Hang:
    """Hang the part between two pegs a unit apart whose ends hang down to the directrix."""
    return from_parameter(1.0, 0.0, 0.5 / u)


def _peg_length(u: float) -> object:
    hang = _peg_chain(u)
    return hang.length + 2.0 * (hang.parameter + hang.sag)


CONSTANTS = [
    # where a function is least, a search finds its place to half the digits of its value
    Published("least end pull", OEIS, "u tanh u = 1", lambda: _least_end_pull().u, "1.19967864", within=5e-8),
    Published("least end pull", OEIS, "Laplace limit", lambda: 0.5 / _end(), "0.6627434193"),
    # printed as rounded up
    Published("least end pull", LAMB, "greatest span w/T", lambda: 1.0 / _end(), "1.326", within=6e-4),
    Published("least end pull", CLASSIC, "greatest span w/T", lambda: 1.0 / _end(), "1.3254868387"),
    Published("least end pull", CLASSIC, "sag/span", lambda: _least_end_pull().sag, "0.337661500969", within=3e-8),
    Published("least end pull", CLASSIC, "length/span", lambda: _least_end_pull().length, "1.25773645617", within=5e-8),
    Published(
        "least end pull",
        CLASSIC,
        "slope deg",
        lambda: degrees(float(_least_end_pull().slope_to)),
        "56.4658351275",
        within=2e-6,
    ),
    Published("least end pull", CLASSIC, "Tmax/wS", _end, "0.754439780769"),
    Published("cable over a pulley", CLASSIC, "least of cosh u / u", lambda: 2.0 * _end(), "1.50887956154"),
    Published("length 1.2", LEVEL, "sag", lambda: from_length(1.0, 0.0, 1.2).sag, "0.292343797601"),
]
RAISED = from_parameter(3.13359847394482, 3.0, 2.0)
MOORED = from_parameter(693.147180559945, 250.0, 1000.0)
BRANCHES = [
    Published("catenoid", CATENOID, "stable neck", lambda: _neck(0.848337938095), "1", within=2e-12),
    Published("catenoid", CATENOID, "unstable neck", lambda: _neck(0.235094990235), "1", within=2e-11),
    Published("pegs", PEGS, "least length/d", lambda: _peg_length(1.0), "2.718281828"),
    Published("pegs", PEGS, "least length/d is e", lambda: _peg_length(1.0), str(exp(1.0)), within=1e-14),
    Published("pegs", PEGS, "sag/d at the least", lambda: _peg_chain(1.0).sag, "0.271540317408"),
    Published("3 d, shallow", PEGS, "sag/d", lambda: _peg_chain(0.61906128673595).sag, "0.159771544008"),
    Published("3 d, shallow", PEGS, "length/d", lambda: _peg_length(0.61906128673595), "3", within=1e-12),
    Published("3 d, deep", PEGS, "sag/d", lambda: _peg_chain(1.5121345516578).sag, "0.45578658808174", within=1e-12),
    Published("3 d, deep", PEGS, "length/d", lambda: _peg_length(1.5121345516578), "3", within=1e-12),
    Published("4 d, shallow", PEGS, "sag/d", lambda: _peg_chain(0.35740295618139).sag, "0.0903059133804"),
    Published("4 d, deep", PEGS, "sag/d", lambda: _peg_chain(2.1532923641103).sag, "0.78127694696103", within=1e-12),
    Published("h = 3 m", FLOOR, "hanging length m", lambda: RAISED.length, "4.58257569496"),
    Published("h = 3 m", FLOOR, "Ttop N", lambda: RAISED.pulls(20.0).at_to, "100", within=1e-12 * 100),
    Published("h = 3 m", FLOOR, "touches at m", lambda: RAISED.vertex_at, "0", within=1e-13),
    Published("h = 250 m", FLOOR, "hanging length m", lambda: MOORED.length, "750", within=1e-11),
    Published("h = 250 m", FLOOR, "Ttop N", lambda: MOORED.pulls(700.0).at_to, "875000", within=1e-7),
]


# k - 1, u and level sag over span
STRETCHES = [
    ("1e-12", "0.00000244948974278", "6.12372435696009E-7"),
    ("1e-6", "0.00244948937536", "0.000612372650026106"),
    ("1e-4", "0.0244945300184", "0.00612393868316615"),
    ("0.01", "0.244582947947", "0.0614511611163112"),
    ("0.1", "0.763400797561", "0.200300790736038"),
    ("0.5", "1.62213121772", "0.502633261648315"),
    ("1", "2.17731898497", "0.796388355860299"),
    ("4", "3.57823480845", "2.36416835333887"),
    ("99", "7.28399768128", "49.9314034951817"),
    ("999999", "17.3629991977", "499999.971203133"),
    ("1e100", "236.417254752", "5.00000000000E+99"),
]
SLACKS = [("1e-4", "0.00612393868317"), ("1e-8", "0.0000612372437839"), ("1e-12", "6.12372435696E-7")]
# span, parameter, u and depth of the lowest point under the lower end
NARROW = [
    ("1e-6", "2.78624616119E-8", "17.94529166", "0.499999972138"),
    ("1e-3", "0.0000476111098552", "10.50175057", "0.499952390401"),
    ("0.1", "0.00962976773666", "5.192233226", "0.49043205197"),
]
# rise, u, parameter and length over span, slope at the base in degrees
ARCHES = [
    ("0.25", "0.930821193652", "0.537160094", "1.150791114", "46.96832"),
    ("0.5", "1.61613751377", "0.309379614", "1.495833699", "67.52732"),
    ("1", "2.46649713621", "0.202716635", "2.371019418", "80.29654"),
    ("1.5", "2.99029122596", "0.167207794", "3.317603583", "84.24401"),
]


def _stretched() -> Iterator[Published]:
    for more, u, sag in STRETCHES:
        hang = from_excess(1.0, 0.0, float(more))
        yield Published(f"k - 1 = {more}", STRETCH, "u", partial(getattr, hang, "u"), u)
        yield Published(f"k - 1 = {more}", STRETCH, "sag/span", partial(getattr, hang, "sag"), sag)
    for slack, sag in SLACKS:
        hang = from_excess(1.0, 0.0, float(slack))
        yield Published(f"eps = {slack}", SHALLOW, "sag/span", partial(getattr, hang, "sag"), sag)


def _narrowed() -> Iterator[Published]:
    for span, parameter, u, below in NARROW:
        hang = from_length(float(span), 1.0, 2.0)
        yield Published(f"S = {span}", PLUMB, "parameter", partial(getattr, hang, "parameter"), parameter)
        yield Published(f"S = {span}", PLUMB, "u", partial(getattr, hang, "u"), u)
        yield Published(f"S = {span}", PLUMB, "below the lower end", partial(getattr, hang, "below_from"), below)


def _risen() -> Iterator[Published]:
    for rise, u, parameter, length, base in ARCHES:
        hang, case = from_sag(1.0, 0.0, float(rise)), f"rise/span {rise}"
        yield Published(case, RISE, "u", partial(getattr, hang, "u"), u)
        yield Published(case, RISE, "a/span", partial(getattr, hang, "parameter"), parameter)
        yield Published(case, RISE, "length/span", partial(getattr, hang, "length"), length)
        yield Published(case, RISE, "base, degrees", partial(degrees, float(hang.slope_to)), base)


ARCH = from_parameter(2.0 * 2.5 * 1.3, 0.0, 2.5)
LOOSE = "a = 2.5, u = 1.3"
CLASSICS = [
    Published(LOOSE, CLASSICAL, "area under half", lambda: 0.5 * ARCH.length * ARCH.parameter, "10.6148902331"),
    Published(LOOSE, CLASSICAL, "end radius", lambda: ARCH.pulls(1.0).at_to ** 2 / ARCH.parameter, "9.7112572583"),
    Published(LOOSE, CLASSICAL, "T/w less sag", lambda: ARCH.pulls(1.0).at_to - ARCH.sag, "2.5", within=1e-14),
]

ALL = [*CONSTANTS, *BRANCHES, *_stretched(), *_narrowed(), *_risen(), *CLASSICS]


@pytest.mark.parametrize("row", ALL, ids=str)
def test_published_catenary_is_met(row: Published) -> None:
    row.check()
