"""An arch: a hanging curve stood up, with thickness, asked for by one fact of one of its lines."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import Annotated, Any, ClassVar

import numpy as np
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.arch.asked import FACTS, AskedArch, Plane, Wanted
from geom.arch.filling import fill
from geom.arch.making import make
from geom.arch.refusal import NoArch
from geom.arch.ring import Profile
from geom.arch.setting_out import MOST_STATIONS
from geom.errors import SolveError, near, say
from geom.fields import Count, Elevation, Feature, Length, PointField, PositiveForce, Reach, Section, Size, choice
from geom.registry import Fault, Kind, Outcome, Refusal
from geom.result import fixed
from geom.setting.materials import MaterialRef
from geom.setting.options import Setting
from geom.setting.supports import SupportRef

LATER = frozenset({"wall", "bricks", "joint_range", "ribs", "ties", "fill", "loads", "bend", "segments"})
LATER_SHAPES = ("funicular", "parabola", "circle")
LATER_SECTIONS = ("round", "tube", "triangle")
MOST_BLOCKS = 10_000  # of one arch: stones of a millimetre over a span of ten metres
OFF_PLANE = 1e-6  # of the span: a passing point that far off the arch's plane is off it, not a rounding

_POINT: TypeAdapter[Any] = TypeAdapter(PointField)
_LENGTH: TypeAdapter[float] = TypeAdapter(Length)
_ELEVATION: TypeAdapter[float] = TypeAdapter(Elevation)
_SIZE: TypeAdapter[float] = TypeAdapter(Size)


def _one_of(known: str, later: tuple[str, ...]) -> BeforeValidator:
    """Return the validator of a key of which this version solves one word."""

    def read(raw: Any) -> str:  # noqa: ANN401 - as the file has it
        if raw == known:
            return known
        if (isinstance(raw, str) and raw in later) or (isinstance(raw, list) and known == "rectangle"):
            raise ValueError(f'{say(raw)} is not solved by this version yet; give "{known}"')
        hint = near(raw, (known, *later)) if isinstance(raw, str) else ""
        raise ValueError(f'{say(raw)} is not known here{hint}; give "{known}"')

    return BeforeValidator(read)


def _thickness(raw: Any, info: ValidationInfo) -> float:  # noqa: ANN401
    if isinstance(raw, list):
        raise ValueError(f"{say(raw)}, a taper, is not solved by this version yet; give one thickness")
    return _SIZE.validate_python(raw, context=info.context)


def _through(raw: Any, info: ValidationInfo) -> tuple[float, ...]:  # noqa: ANN401
    if isinstance(raw, list) and len(raw) == 2:
        x = _LENGTH.validate_python(raw[0], context=info.context)
        return (x, _ELEVATION.validate_python(raw[1], context=info.context))
    if isinstance(raw, list) and len(raw) == 3:
        return tuple(_POINT.validate_python(raw, context=info.context))
    raise ValueError(f"{say(raw)} is no point; give [distance on plan from the first springing, z] or [x, y, z]")


class SettingOut(Section):
    """The key `setting_out` of an arch."""

    step: Size | None = Field(None, description="distance of the ordinates along the springing line")
    widths_at: tuple[Reach, ...] = Field((), description="heights over the lower springing to give clear widths at")


class Arch(Feature):
    """The table [[arch]]."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (FACTS,)
    later: ClassVar[frozenset[str]] = LATER

    from_: SupportRef = Field(alias="from", description="first springing: a support's name or a point [x, y, z]")
    to: SupportRef = Field(description="second springing: a support's name or a point [x, y, z]")
    rise: Size | None = Field(None, description="highest point of the face line over its lower springing")
    length: Size | None = Field(None, description="length of the face line")
    thrust: PositiveForce | None = Field(None, description="horizontal thrust under own weight")
    through: Annotated[tuple[float, ...] | None, BeforeValidator(_through)] = Field(
        None, description="a point of the face line, [distance on plan, z] or [x, y, z]"
    )
    face: Annotated[str, choice("axis", "intrados", "extrados")] = Field(
        "axis", description="the line that springs at the springings and that facts are of"
    )
    shape: Annotated[str, _one_of("catenary", LATER_SHAPES)] = Field("catenary", description="its shape")
    curve: Annotated[str, choice("axis", "intrados", "extrados")] = Field(
        "axis", description="the line that has the shape; the others are its parallels"
    )
    thickness: Annotated[float, BeforeValidator(_thickness)] = Field(description="thickness of the ring")
    depth: Size = Field(description="its depth into the page")
    foot: Annotated[str, choice("level", "radial")] = Field("level", description="how the ring ends at the springing")
    section: Annotated[str, _one_of("rectangle", LATER_SECTIONS)] = Field("rectangle", description="its section")
    material: MaterialRef = Field(description='its material, like "brick" or one of your own [material.NAME]')
    blocks: Count | None = Field(None, description="count of voussoirs; an odd one has a keystone")
    joint: Reach = Field(0.0, description="width of the mortar joints between blocks")
    setting_out: SettingOut | None = Field(None, description="{ step = 100, widths_at = [2000] }")


def solve(arches: Sequence[Arch], setting: Setting) -> list[Outcome]:
    """Solve each arch of a design."""
    return [_solve(arch, setting) for arch in arches]


def _solve(arch: Arch, setting: Setting) -> Outcome:
    faults = tuple(_faults(arch, setting))
    if faults:
        return Refusal(faults)
    asked = _asked(arch)
    try:
        return fill(asked, make(asked), setting)
    except NoArch as error:
        return Refusal((Fault((error.key,), error.said(setting.stated)),))
    except SolveError as error:
        return Refusal((Fault((error.key or asked.fact,), str(error)),))


def _faults(arch: Arch, setting: Setting) -> Iterator[Fault]:
    """What is wrong with an arch before anything is solved."""
    span = math.hypot(arch.to.at[0] - arch.from_.at[0], arch.to.at[1] - arch.from_.at[1])
    if span == 0.0:
        yield Fault(("to",), "stands over or under `from` on one plumb line; give two springings apart on plan")
        return
    if arch.blocks is None and "joint" in arch.model_fields_set:
        yield Fault(("joint",), "has no blocks to stand between; give blocks, or leave it out")
    if arch.blocks is not None and not 2 <= arch.blocks <= MOST_BLOCKS:
        text = f"{arch.blocks} are no ring of blocks; give 2 to {MOST_BLOCKS}, an odd number for a keystone"
        yield Fault(("blocks",), text)
    step = arch.setting_out.step if arch.setting_out else None
    if step is not None and 4.0 * (span + 2.0 * arch.thickness) / step > MOST_STATIONS:
        yield Fault(("setting_out", "step"), f"{setting.stated(step)} makes too many ordinates; give a longer step")
    if arch.through is not None and len(arch.through) == 3:
        yield from _off_plane(arch, span, setting)


def _off_plane(arch: Arch, span: float, setting: Setting) -> Iterator[Fault]:
    _, aside = _plane(arch).found(np.array(arch.through))
    if abs(aside) > OFF_PLANE * span:
        text = f"stands {setting.stated(abs(aside))} off the plane through both springings; give a point in it"
        yield Fault(("through",), f"{text}, or [distance on plan, z]")


def _asked(arch: Arch) -> AskedArch:
    """Return an arch as the room takes it."""
    fact = next(name for name in FACTS if getattr(arch, name) is not None)
    plan = arch.setting_out or SettingOut()
    return AskedArch(
        mark=arch.mark,
        start=arch.from_,
        end=arch.to,
        fact=fact,
        value=_value(arch, fact),
        profile=Profile(arch.thickness, arch.curve, arch.face, arch.foot),  # type: ignore[arg-type]
        depth=arch.depth,
        material=arch.material,
        wanted=Wanted(arch.blocks, arch.joint, plan.step, plan.widths_at),
        copies=arch.copies,
    )


def _value(arch: Arch, fact: str) -> tuple[float, ...]:
    value = getattr(arch, fact)
    if not isinstance(value, tuple):
        return (float(value),)
    return value if len(value) == 2 else (_plane(arch).found(np.array(value))[0], value[2])


def _plane(arch: Arch) -> Plane:
    return Plane(fixed(arch.from_.at, 3), fixed(arch.to.at, 3))


KIND = Kind("arch", Arch, solve)
