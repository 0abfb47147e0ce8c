"""Named supports, and what a key that takes a support may say: a name or a bare point."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.errors import say
from geom.fields import Point, PointField, Section, Size, look_up


class SupportEntry(Section):
    """The table [support.NAME]."""

    at: PointField = Field(description="where it is, [x, y, z]")
    height: Size | None = Field(None, description="its height over its foot, for the moment there")


@dataclass(frozen=True)
class Support:
    """A place that something hangs from or stands on; `name` is empty for a bare point."""

    at: Point
    name: str = ""
    height: float | None = None


_POINT: TypeAdapter[Point] = TypeAdapter(PointField)


def _support(raw: Any, info: ValidationInfo) -> Support:  # noqa: ANN401 - as the file has it
    if isinstance(raw, Support):
        return raw
    if isinstance(raw, str):
        entry: Support = look_up("support", raw, info)
        return entry
    if isinstance(raw, list):
        if len(raw) != 3:
            raise ValueError(f"{say(raw)} is no point; give [x, y, z] or a support's name")
        return Support(at=_POINT.validate_python(raw, context=info.context))
    raise ValueError(f"{say(raw)} is no support; give a support's name or a point [x, y, z]")


SupportRef = Annotated[Support, BeforeValidator(_support)]
