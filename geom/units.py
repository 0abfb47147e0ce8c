"""Text with a unit to a float in SI and back: the only place where units are converted.

Written lengths are the trade's: ``4.2 m``, ``600 mm``, ``13 ft 9 1/2 in``, ``13'-9 1/2"``. The parser knows
these and refuses everything else, because a length guessed wrong is cut wrong. Amounts and factors are exact
rationals until the last step, so that what is returned is the double nearest to what was written.

Factors
-------
inch, foot, pound
    25.4 mm, 304.8 mm and 0.45359237 kg exactly: international yard and pound agreement, 1959 (Federal
    Register 24 FR 5348).
kgf, lbf
    The weight of a kilogram, a pound at standard gravity, 9.80665 m/s2 exactly (3rd CGPM, 1901, declaration
    on mass and weight).
"""

import math
import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import ROUND_HALF_UP, Decimal
from fractions import Fraction
from types import MappingProxyType

from geom.errors import near, say

STANDARD_GRAVITY = 9.80665  # m/s2, 3rd CGPM, 1901


@dataclass(frozen=True, slots=True)
class LengthUnit:
    """A unit in which designs and drawings are written.

    Attributes
    ----------
    metres : float
        Length of one, m.
    insunits : int
        Its code in the DXF header variable $INSUNITS (DXF reference, section HEADER).
    """

    metres: float
    insunits: int


UNITS: Mapping[str, LengthUnit] = MappingProxyType(
    {
        "mm": LengthUnit(0.001, 4),
        "cm": LengthUnit(0.01, 5),
        "m": LengthUnit(1.0, 6),
        "in": LengthUnit(0.0254, 1),
        "ft": LengthUnit(0.3048, 2),
    }
)


@dataclass(frozen=True, slots=True, eq=False)  # each is one of a kind, and hashable for use in annotations
class Quantity:
    """A kind of quantity; called with what a user wrote, it returns a float in SI.

    Attributes
    ----------
    name : str
        What it is called in messages.
    si : str
        The unit of what is returned (temperatures stay degrees Celsius).
    example : str
        A right way of writing it, for messages.
    units : Mapping[str, Fraction]
        Each known unit in `si`.
    bare : str
        The unit a number without one counts in; None where a unit must be given.
    zeros : Mapping[str, Fraction]
        The amount at which `si` is nought, for units where that is not nought.
    """

    name: str
    si: str
    example: str
    units: Mapping[str, Fraction]
    bare: str | None = None
    zeros: Mapping[str, Fraction] = field(default_factory=dict)

    def __call__(self, value: object, unit: str | None = None) -> float:
        """Return a written value in SI: the nearest double, rounded once.

        Parameters
        ----------
        value : object
            A number, or a text of a number (a fraction, ``9 1/2``, is one) with or without a unit.
        unit : str
            The unit a number without one counts in, in place of `bare`.

        Raises
        ------
        ValueError
            The text says what was found and what would be right.
        """
        read = _amount_and_unit(value)
        if read is None:
            raise ValueError(self._no_quantity(value))
        amount, written = read
        counted = written or unit or self.bare
        if counted is None or counted not in self.units:
            raise ValueError(self._no_unit(value, counted))
        try:
            return float((amount - self.zeros.get(counted, 0)) * self.units[counted])
        except OverflowError as error:
            message = f"{say(value)} is too large; write it like {say(self.example)}"
            raise ValueError(message) from error

    def _no_quantity(self, value: object) -> str:
        text = value if isinstance(value, str) else ""
        if re.fullmatch(r"[^,]*[0-9],[0-9]{1,2}(?:[^0-9,][^,]*)?", text):
            advice = f"write the decimal with a point, like {say(text.replace(',', '.'))}"
        elif "," in text:
            advice = f"write the number without commas, like {say(self.example)}"
        elif "ft" in self.units and re.search(r"[0-9] ?(?:'|′|ft)", text):
            advice = f"write feet and inches like {say(_FEET_AND_INCHES)}"
        else:
            advice = f"write it like {say(self.example)}"
        return f"{say(value)} is no {self.name}; {advice}"

    def _no_unit(self, value: object, unit: str | None) -> str:
        known = ", ".join(filter(None, self.units))
        if unit is None:
            return f"{say(value)} has no unit; give one of {known}, like {say(self.example)}"
        others = [other.name for other in QUANTITIES if unit in other.units]
        if not others:
            fault = f"is in no known unit of {self.name}; give one of {known}"
            return f"{say(value)} {fault}{near(unit, self.units)}"
        advice = near(unit, self.units) or f"; write it like {say(self.example)}"
        return f"{say(value)} is in a unit of {others[0]}, not of {self.name}{advice}"


_INCH = Fraction("0.0254")  # m
_FOOT = 12 * _INCH
_POUND = Fraction("0.45359237")  # kg
_GRAVITY = Fraction(str(STANDARD_GRAVITY))
_LBF = _POUND * _GRAVITY
_MILLI, _ONE, _KILO, _MEGA, _GIGA = (Fraction(10) ** power for power in (-3, 0, 3, 6, 9))
# 50 decimals (OEIS A000796), so that a converted angle too is the nearest double.
_PI = Fraction("3.14159265358979323846264338327950288419716939937511")
_FEET_AND_INCHES = "13'-9 1/2\""

_LENGTHS = {"mm": _MILLI, "cm": _ONE / 100, "m": _ONE, "km": _KILO, "in": _INCH, "ft": _FOOT}
_FORCES = {"N": _ONE, "kN": _KILO, "MN": _MEGA, "kgf": _GRAVITY, "lbf": _LBF}
_MASSES = {"kg": _ONE, "g": _MILLI, "t": _KILO, "lb": _POUND, "oz": _POUND / 16}
_AREAS = {"mm2": _MILLI**2, "cm2": _ONE / 10**4, "m2": _ONE, "in2": _INCH**2, "ft2": _FOOT**2}
_PRESSURES = {
    "Pa": _ONE,
    "kPa": _KILO,
    "MPa": _MEGA,
    "GPa": _GIGA,
    "N/mm2": _MEGA,
    "N/m2": _ONE,
    "kN/m2": _KILO,
    "kgf/mm2": _GRAVITY * _MEGA,
    "psi": _LBF / _INCH**2,
    "ksi": _LBF * _KILO / _INCH**2,
    "psf": _LBF / _FOOT**2,
}
_FORCES_PER_LENGTH = {"N/m": _ONE, "kN/m": _KILO, "N/mm": _KILO, "kgf/m": _GRAVITY, "lbf/ft": _LBF / _FOOT}
_DENSITIES = {"kg/m3": _ONE, "pcf": _POUND / _FOOT**3, "lb/ft3": _POUND / _FOOT**3}
_MASSES_PER_LENGTH = {"kg/m": _ONE, "g/m": _MILLI, "lb/ft": _POUND / _FOOT}
_DEGREES = {"C": _ONE, "F": Fraction(5, 9)}
_EXPANSIONS = {"/K": _ONE, "/C": _ONE, "/F": Fraction(9, 5)}

length = Quantity("length", "m", "4.2 m", _LENGTHS)
force = Quantity("force", "N", "1.2 kN", _FORCES, bare="N")
mass = Quantity("mass", "kg", "3 kg", _MASSES, bare="kg")
area = Quantity("area", "m2", "20 mm2", _AREAS)
pressure = Quantity("pressure", "Pa", "500 Pa", _PRESSURES)
modulus = Quantity("modulus", "Pa", "100 GPa", _PRESSURES)
force_per_area = Quantity("force per area", "N/m2", "0.12 kN/m2", _PRESSURES)
force_per_length = Quantity("force per length", "N/m", "120 N/m", _FORCES_PER_LENGTH)
force_density = Quantity("force density", "N/m", "50 N/m", _FORCES_PER_LENGTH)
density = Quantity("density", "kg/m3", "1900 kg/m3", _DENSITIES, bare="kg/m3")
mass_per_length = Quantity("mass per length", "kg/m", "0.5 lb/ft", _MASSES_PER_LENGTH, bare="kg/m")
expansion = Quantity("expansion", "/K", "12e-6 /K", _EXPANSIONS, bare="/K")
temperature = Quantity("temperature", "C", "20 C", _DEGREES, bare="C", zeros={"F": Fraction(32)})
angle = Quantity("angle", "rad", "30 deg", {"deg": _PI / 180, "rad": _ONE}, bare="deg")
ratio = Quantity("ratio", "", "0.05", {"": _ONE, "%": _ONE / 100}, bare="")

QUANTITIES = (
    length, force, mass, area, pressure, modulus, force_per_area, force_per_length, force_density, density,
    mass_per_length, expansion, temperature, angle, ratio,
)  # fmt: skip

# One number, or feet and inches; a unit, known or not. Nothing else is a form: "4 m 2 cm", "1.2.3 m", "9**9".
_FORM = re.compile(
    r"""(?P<sign>[+-]?)
    (?: (?P<feet>[0-9]+)\ ?(?:'|ft(?![0-9]))[ -]? )?
    (?: (?:(?P<whole>[0-9]+)[ -])? (?P<top>[0-9]+)/(?P<bottom>[0-9]+)
      | (?P<decimal>(?:[0-9]+(?:\.[0-9]+)?|\.[0-9]+)(?:[eE][+-]?[0-9]{1,3})?) )
    \ ?(?P<unit>['"] | [A-Za-z°%]+[0-9]?(?:\ ?/\ ?[A-Za-z]+[0-9]?)? | /\ ?[A-Za-z]+)?""",
    re.VERBOSE,
)
_ALIKE = str.maketrans({"′": "'", "″": '"', "−": "-", "⁄": "/", "²": "2", "³": "3", "^": None})
_ALIASES = {"'": "ft", '"': "in", "°": "deg", "°C": "C", "°F": "F"}
_LONGEST = 60  # characters; nothing in the trade is longer, and work must not grow with what is pasted


def _amount_and_unit(value: object) -> tuple[Fraction, str] | None:
    """Return the number and the unit as written, feet and inches as inches; None if there is no such form."""
    match value:
        case bool():
            return None
        case int():
            return Fraction(value), ""
        case float() if math.isfinite(value):
            # What was written is the shortest decimal that names this double, not its binary digits.
            return Fraction(repr(float(value))), ""
        case str() if len(value) <= _LONGEST:
            form = _FORM.fullmatch(" ".join(value.translate(_ALIKE).split()))
            return _signed(form) if form else None
    return None


def _signed(form: re.Match[str]) -> tuple[Fraction, str] | None:
    unit = (form["unit"] or "").replace(" /", "/").replace("/ ", "/")
    unit = _ALIASES.get(unit, unit)
    amount = _unsigned(form)
    if amount is None or (form["feet"] and (unit != "in" or amount >= 12)):
        return None  # after feet there are inches, and fewer than make another foot
    amount += 12 * int(form["feet"] or 0)
    return (-amount if form["sign"] == "-" else amount), unit


def _unsigned(form: re.Match[str]) -> Fraction | None:
    """Return a decimal, a fraction, or a whole number and a proper fraction."""
    if form["decimal"]:
        return Fraction(form["decimal"])
    top, bottom = int(form["top"]), int(form["bottom"])
    if bottom == 0 or (form["whole"] and top >= bottom):
        return None
    return int(form["whole"] or 0) + Fraction(top, bottom)


def feet_inches(metres: float, parts: int = 16) -> str:
    """Return a length in feet, inches and fractions, as ``13'-9 1/2"``.

    Rounded once, on the total, half away from zero; then sixteen sixteenths are carried to an inch and twelve
    inches to a foot, and the fraction is reduced (common practice). `length` reads it back.

    Parameters
    ----------
    metres : float
        The length, m.
    parts : int
        Into how many parts the inch is divided.

    Raises
    ------
    ValueError
        The length is not finite.
    """
    total = _rounded(_decimal(metres) * parts / Decimal("0.0254"))
    inches, top = divmod(abs(total), parts)
    feet, inches = divmod(inches, 12)
    fraction = f" {Fraction(top, parts)}" if top else ""
    return f"{'-' if total < 0 else ''}{feet}'-{inches}{fraction}\""


def number(metres: float, unit: str, decimals: int) -> str:
    """Return a length as a plain number in one of `UNITS`, rounded half away from zero.

    Raises
    ------
    ValueError
        The length is not finite.
    """
    total = _rounded((_decimal(metres) / _decimal(UNITS[unit].metres)).scaleb(decimals))
    return f"{Decimal(total).scaleb(-decimals):f}"  # by way of an integer, which has no -0


def _decimal(value: float) -> Decimal:
    """Return the shortest decimal of a double: 0.0125 m is exactly half way between 12 and 13 mm."""
    if not math.isfinite(value):
        raise ValueError(f"{value} m cannot be written as a length")
    return Decimal(repr(float(value)))


def _rounded(value: Decimal) -> int:
    return int(value.to_integral_value(rounding=ROUND_HALF_UP))  # decimal's half up is away from zero
