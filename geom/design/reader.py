"""From the text of a design file to a typed design, with every problem of the file found in one reading.

Validation is pydantic's; this module gives it its context (the unit, what is named), puts each of its complaints on the
line of its key, and says it in words with a remedy. A piece that is wrong is left out of the design that is returned,
so that solving can find what is wrong with the others in the same run.
"""

from __future__ import annotations

import tomllib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Any, TypeVar

from pydantic import ValidationError

from geom.design.positions import Positions, index
from geom.design.syntax import syntax_problem
from geom.errors import Problem, near, say
from geom.fields import Feature, Known, Section, Unusable, mark, one_line
from geom.registry import Path, kinds
from geom.setting.fittings import Fitting, FittingEntry
from geom.setting.materials import MaterialEntry, user_material
from geom.setting.options import Drawing, Print, Setting, Shop, Site
from geom.setting.stock import StockEntry, user_stock
from geom.setting.supports import Support, SupportEntry

UNITS = ("mm", "cm", "m", "in", "ft")
SECTIONS: dict[str, type[Section]] = {"shop": Shop, "site": Site, "drawing": Drawing, "print": Print}
NAMED: dict[str, type[Section]] = {
    "support": SupportEntry,
    "fitting": FittingEntry,
    "material": MaterialEntry,
    "stock": StockEntry,
}
"""In the order in which they are read: a stock may be of a material of the design's own."""

MOST_PIECES = 100_000
_LONGEST_TITLE = 200  # characters: two lines over the largest sheet

S = TypeVar("S", bound=Section)


@dataclass(frozen=True)
class Item:
    """One piece as written: its kind's name, its path in the file, and the typed feature."""

    kind: str
    path: Path
    feature: Feature


@dataclass(frozen=True)
class Design:
    """A typed design: what its pieces share, and the pieces in the order of the file."""

    name: str
    title: str
    setting: Setting
    items: tuple[Item, ...]
    positions: Positions
    unused: tuple[str, ...] = ()
    """Named entries that nothing in the design refers to, as they are written: `[fitting.shackle]`."""


@dataclass(frozen=True)
class Reading:
    """What came of reading: a design of all that could be read (None if nothing could), and every problem."""

    design: Design | None
    problems: tuple[Problem, ...]


@dataclass
class _Reader:
    """Collects the problems of one file; every method adds what it finds and returns what could be read."""

    raw: dict[str, Any]
    positions: Positions
    problems: list[Problem] = field(default_factory=list)

    def add(self, path: Path, feature: str, key: str, text: str) -> None:
        self.problems.append(Problem(self.positions.line(path), feature, key, text))

    def unit(self) -> str | None:
        """Return the design's unit; None, with a problem, if it has none that is known."""
        unit = self.raw.get("unit")
        if unit in UNITS:
            return str(unit)
        listed = ", ".join(f'"{name}"' for name in UNITS)
        if unit is None:
            self.problems.append(Problem(1, "", "unit", f"is missing; state the unit of bare lengths: one of {listed}"))
        else:
            hint = near(unit, UNITS) if isinstance(unit, str) else ""
            self.add(("unit",), "", "unit", f"{say(unit)} is no unit of length{hint}; give one of {listed}")
        return None

    def title(self, name: str) -> str:
        """Return the design's title; its name where it has none."""
        try:
            return one_line(self.raw.get("title", ""))[:_LONGEST_TITLE] or name
        except ValueError as error:
            self.add(("title",), "", "title", str(error))
            return name

    def top_level(self, tables: Iterable[str]) -> None:
        """Complain of every key of the file itself that no reader knows."""
        names = ("title", "unit", *SECTIONS, *NAMED, *tables)
        for key in self.raw:
            if key not in names:
                hint = near(key, names) or f"; the tables of a design are {', '.join(sorted(names))}"
                self.add((key,), "", key, f"is not known{hint}")

    def section(self, name: str, model: type[S], known: Known) -> S:
        """Return a section of the file, or its defaults where it is absent or wrong."""
        raw = self.raw.get(name, {})
        read = self.table(model, raw, (name,), f"[{name}]", known)
        return read if read is not None else model()

    def table(self, model: type[S], raw: Any, path: Path, feature: str, known: Known) -> S | None:  # noqa: ANN401
        """Return one validated table, or None with its problems added."""
        if not isinstance(raw, dict):
            self.add(path, feature, "", f"is {say(raw)}, not a table; write its keys under a header of its own")
            return None
        before = len(self.problems)
        self._groups(model, raw, path, feature)
        try:
            read = model.model_validate(raw, context=known)
        except ValidationError as error:
            self._complaints(error, raw, path, feature, model)
            return None
        return read if len(self.problems) == before else None

    def _groups(self, model: type[Section], raw: Mapping[str, Any], path: Path, feature: str, inner: Path = ()) -> None:
        """Complain where not exactly one key of a group is given (a misspelt or a later key counts as given)."""
        known = model.keys()
        strays = [key for key in raw if key not in known]
        groups = [(group, True) for group in model.one_of] + [(group, False) for group in model.at_most_one_of]
        for group, needed in groups:
            given = [key for key in raw if key in group]
            if len(given) > 1:
                listed = " and ".join(f"`{key}`" for key in given)
                text = f"{listed} are given together; give just one of them"
                self.add((*path, given[1]), feature, _key_text((*inner, given[1])), text)
            elif not given and needed and not any(near(stray, group) or stray in model.later for stray in strays):
                self.add(path, feature, _key_text((*inner, group[0])), f"is missing; give one of {', '.join(group)}")
        for key, table in _tables_in(model, raw):
            self._groups(_model_at(model, (*key, "")), table, (*path, *key), feature, (*inner, *key))

    def _complaints(
        self, error: ValidationError, raw: Mapping[str, Any], path: Path, feature: str, model: type[Section]
    ) -> None:
        """Add the problems of a validation; what refers to an entry that is wrong itself is passed over."""
        entries = error.errors(include_url=False)
        strays = [str(entry["loc"][-1]) for entry in entries if entry["type"] == "extra_forbidden"]
        for entry in entries:
            loc = _user_path(entry["loc"], raw)
            cause = entry.get("ctx", {}).get("error")
            missing = entry["type"] == "missing"
            if isinstance(cause, Unusable) or (missing and any(near(stray, [str(loc[-1])]) for stray in strays)):
                continue
            place = path if missing and len(loc) == 1 else (*path, *loc)
            self.add(place, feature, _key_text(loc), _words(entry, cause, _model_at(model, loc)))

    def named(self, known: Known) -> dict[str, dict[str, Any]]:
        """Return every named table's entries; an entry that is wrong is None, its problems added."""
        result: dict[str, dict[str, Any]] = {}
        for table, model in NAMED.items():
            raw = self.raw.get(table, {})
            if not isinstance(raw, dict):
                self.add((table,), f"[{table}]", "", f"is {say(raw)}, not tables; write [{table}.NAME]")
                raw = {}
            loose = [key for key, entry in raw.items() if key in model.keys() and not isinstance(entry, dict)]  # noqa: SIM118
            if loose:
                text = f"has `{loose[0]}` of its own; write [{table}.NAME], each with a name"
                self.add((table, loose[0]), f"[{table}]", "", text)
                raw = {key: entry for key, entry in raw.items() if key not in model.keys()}  # noqa: SIM118
            so_far = replace(known, named=dict(result))
            result[table] = {name: self._entry(table, model, name, entry, so_far) for name, entry in raw.items()}
        return result

    def _entry(self, table: str, model: type[Section], name: str, raw: Any, known: Known) -> Any:  # noqa: ANN401
        path: Path = (table, name)
        feature = f"[{table}.{name}]"
        try:
            mark(name)
        except ValueError as error:
            self.add(path, feature, "", str(error))
        entry = self.table(model, raw, path, feature, known)
        if entry is None:
            return None
        try:
            return _MAKERS[table](name, entry)
        except ValueError as error:
            key = getattr(error, "key", "")
            self.add((*path, key) if key in raw else path, feature, key, str(error))
            return None

    def items(self, models: Mapping[str, type[Feature]], known: Known) -> tuple[Item, ...]:
        """Return every piece that could be read, in the order of the file."""
        found: list[Item] = []
        for name, model in models.items():
            raw = self.raw.get(name, [])
            if not isinstance(raw, list):
                self.add(
                    (name,),
                    f"[{name}]",
                    "",
                    f"is one table; write [[{name}]] with two brackets for each piece",
                )
                continue
            for number, entry in enumerate(raw):
                path: Path = (name, number)
                feature = self.table(model, entry, path, _feature_name(name, number, entry), known)
                if feature is not None:
                    found.append(Item(name, path, feature))
        return tuple(sorted(found, key=lambda item: self.positions.line(item.path)))

    def marks(self, models: Iterable[str]) -> None:
        """Complain of marks given twice; capitals and small letters count as the same, as in a file's name."""
        seen: dict[str, str] = {}
        for name in models:
            entries = self.raw.get(name, [])
            for number, entry in enumerate(entries if isinstance(entries, list) else []):
                given = entry.get("mark") if isinstance(entry, dict) else None
                if not isinstance(given, str):
                    continue
                feature = _feature_name(name, number, entry)
                if given.casefold() in seen:
                    self.add(
                        (name, number, "mark"), feature, "mark",
                        f"{say(given)} is already the mark of {seen[given.casefold()]}; give each piece its own",
                    )  # fmt: skip
                seen.setdefault(given.casefold(), feature)


def _make_support(name: str, entry: SupportEntry) -> Support:
    return Support(entry.at, name, entry.height)


def _make_fitting(name: str, entry: FittingEntry) -> Fitting:
    return Fitting(entry.takes, entry.turns, entry.grip, entry.mass, name)


_MAKERS: dict[str, Any] = {
    "support": _make_support,
    "fitting": _make_fitting,
    "stock": user_stock,
    "material": user_material,
}


def _feature_name(kind: str, number: int, raw: Any) -> str:  # noqa: ANN401 - as the file has it
    given = raw.get("mark") if isinstance(raw, dict) else None
    return f'{kind} "{given}"' if isinstance(given, str) and given else f"{kind} {number + 1}"


def feature_name(item: Item) -> str:
    """Return how an error line names a piece: `hanging "S1"`."""
    return f'{item.kind} "{item.feature.mark}"'


def _user_path(loc: Sequence[str | int], raw: object) -> Path:
    """Keep the part of pydantic's path that is the user's: its tags of unions and validators are dropped."""
    path: list[str | int] = []
    here = raw
    for step in loc:
        if isinstance(here, dict):
            path.append(step)
            if step not in here:  # a key that is missing
                break
            here = here[step]
        elif isinstance(here, list) and isinstance(step, int) and step < len(here):
            path.append(step)
            here = here[step]
    return tuple(path)


def _key_text(path: Path) -> str:
    text = ""
    for step in path:
        text += f"[{step + 1}]" if isinstance(step, int) else (f".{step}" if text else step)
    return text


def _model_at(model: type[Section], loc: Path) -> type[Section]:
    """Return the model that the last key of a path belongs to (a table within a table has a model of its own)."""
    for step in loc[:-1]:
        entry = model.model_fields.get(str(step)) or next(
            (f for f in model.model_fields.values() if f.alias == step), None
        )
        inner = _section_in(entry.annotation) if entry is not None else None
        model = inner or model
    return model


def _tables_in(model: type[Section], raw: Mapping[str, Any]) -> Iterable[tuple[Path, Mapping[str, Any]]]:
    """Yield the tables within a table that have a model of their own, with their paths."""
    for key, value in raw.items():
        if _model_at(model, (key, "")) is model:
            continue
        if isinstance(value, dict):
            yield (key,), value
        elif isinstance(value, list):
            yield from (((key, n), entry) for n, entry in enumerate(value) if isinstance(entry, dict))


def _section_in(annotation: Any) -> type[Section] | None:  # noqa: ANN401 - any type expression
    if isinstance(annotation, type) and issubclass(annotation, Section):
        return annotation
    return next(filter(None, (_section_in(a) for a in getattr(annotation, "__args__", ()))), None)


def _words(entry: Mapping[str, Any], cause: object, model: type[Section]) -> str:
    """Return a pydantic complaint in our words, with what would be right."""
    key = str(entry["loc"][-1])
    match entry["type"]:
        case "missing":
            described = next((f.description for n, f in model.model_fields.items() if key in (n, f.alias)), None)
            return f"is missing; give {described}" if described else "is missing"
        case "extra_forbidden" if key in model.later:
            return "is not solved by this version yet; leave it out"
        case "extra_forbidden":
            listed = ", ".join(model.keys())
            return f"is not known{near(key, model.keys()) or f'; give one of {listed}'}"
        case _ if cause is not None:
            return str(cause)
        case "model_type" | "dict_type" | "model_attributes_type":
            return f"{say(entry['input'])} is no table; write its keys in braces, like {{ key = value }}"
        case "list_type" | "tuple_type":
            return f"{say(entry['input'])} is no list; put it in brackets"
        case _:
            return f"{say(entry['input'])} cannot be read: {entry['msg'][0].lower()}{entry['msg'][1:]}"


def read(text: str, name: str) -> Reading:
    """Read a design file's text.

    Parameters
    ----------
    text : str
        The file's text (TOML).
    name : str
        The design's name, the stem of its file: its title where the file gives none.

    Returns
    -------
    Reading
        The design of all pieces that could be read, and every problem in order of line. Without a unit, or where
        the text is no TOML, there is no design.
    """
    try:
        raw = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        return Reading(None, (syntax_problem(text, error),))
    except (ValueError, RecursionError):  # a whole number of over 4,300 digits; brackets in brackets without end
        return Reading(None, (Problem(1, "", "", "holds a number or a nesting that is too long; shorten it"),))
    models = {entry.name: entry.model for entry in kinds().values()}
    pieces = sum(len(raw[name]) for name in models if isinstance(raw.get(name), list))
    if pieces > MOST_PIECES:  # nothing else is worth the minutes that it would take
        text = f"{pieces} pieces are more than the {MOST_PIECES} of one design; divide it"
        return Reading(None, (Problem(1, "", "", text),))
    reader = _Reader(raw, index(text))
    reader.top_level(models)
    unit = reader.unit()
    title = reader.title("".join(c if c.isprintable() else " " for c in name))
    known = Known(unit or "mm")
    sections = {table: reader.section(table, model, known) for table, model in SECTIONS.items()}
    site = sections["site"]
    origin = site.origin if isinstance(site, Site) else (0.0, 0.0, 0.0)
    known = replace(known, origin=origin)
    known = replace(known, named=reader.named(known))
    items = reader.items(models, known)
    reader.marks(models)
    if not pieces and not reader.problems:
        listed = ", ".join(f"[[{name}]]" for name in models)
        reader.problems.append(Problem(1, "", "", f"the design has no piece; add one of {listed}"))
    problems = tuple(sorted(reader.problems, key=lambda problem: problem.line))
    if unit is None:
        return Reading(None, problems)
    unused = tuple(
        f"[{table}.{entry}]"
        for table in known.named
        for entry in known.named[table]
        if (table, entry) not in known.used
    )
    return Reading(Design(name, title, _setting(unit, sections, raw), items, reader.positions, unused), problems)


def _setting(unit: str, sections: Mapping[str, Any], raw: Mapping[str, Any]) -> Setting:
    return Setting(unit, sections["shop"], sections["site"], sections["drawing"], sections["print"], "print" in raw)
