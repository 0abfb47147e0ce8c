"""Why a text is no TOML: the line to look at and what to write instead.

`tomllib` says where its parsing stopped, which for a text or a list left open is the end of the file. Here
what stands before that place is scanned again, to find where the trouble begins and what was probably meant.
"""

import re
import tomllib
from dataclasses import dataclass

from geom.design.positions import Found, Scanner
from geom.errors import Problem, say

_PLACE = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")
# A heading or a key at the start of a line: the sign that a list before it was left open.
_STATEMENT = re.compile(r"""\[\[?[ \t]*[\w"'][^,\n]*\]|[\w"'.-]+[ \t]*=""")


@dataclass(frozen=True, slots=True)
class _Advice:
    offset: int  # where to look
    text: str


@dataclass(frozen=True, slots=True)
class _Fault:
    """Where reading stopped, and what a scan of the text up to there came upon."""

    text: str
    offset: int
    message: str  # tomllib's, without the place
    scanner: Scanner  # as it ended
    found: tuple[Found, ...]

    @property
    def key(self) -> str:
        """The innermost key that was being read; empty in a heading."""
        if self.in_heading or not self.found or self.found[-1].offset < self.scanner.statement:
            return ""
        return next(key for key in reversed(self.found[-1].path) if isinstance(key, str))

    @property
    def in_heading(self) -> bool:
        heading = self.scanner.brackets[0].offset
        after = self.text.startswith("[", heading) and "\n" not in self.text[heading : self.offset]
        return after or self.text.startswith("[", self.scanner.statement)

    @property
    def character(self) -> str:
        """What stands where reading stopped; empty at the end."""
        return self.text[self.offset : self.offset + 1]

    def line(self, offset: int) -> int:
        return self.text.count("\n", 0, offset) + 1

    def written(self, offset: int) -> str:
        """Return what stands from an offset to the end of its value, or of its line."""
        ends = "\n#,]}" if len(self.scanner.brackets) > 1 else "\n#"
        return re.split(f"[{re.escape(ends)}]", self.text[offset:], maxsplit=1)[0].strip()


def syntax_problem(text: str, error: tomllib.TOMLDecodeError) -> Problem:
    """Return the problem that keeps the text of a design from being read.

    Parameters
    ----------
    text : str
        The whole text.
    error : tomllib.TOMLDecodeError
        What `tomllib` raised for it.
    """
    fault = _fault(text.replace("\r\n", "\n"), error)  # as tomllib does before it counts
    otherwise = _Advice(fault.offset, fault.message[:1].lower() + fault.message[1:])
    advice = next(filter(None, (rule(fault) for rule in _RULES)), otherwise)
    return Problem(fault.line(advice.offset), "", fault.key, advice.text)


def _fault(text: str, error: tomllib.TOMLDecodeError) -> _Fault:
    place = _PLACE.search(str(error))
    offset = len(text)
    if place and place[1]:
        lines = text.split("\n", int(place[1]))[: int(place[1]) - 1]
        offset = sum(len(line) + 1 for line in lines) + int(place[2]) - 1
    scanner = Scanner(text[:offset])
    return _Fault(text, offset, _PLACE.sub("", str(error)), scanner, tuple(scanner))


def _character(fault: _Fault) -> _Advice | None:
    """Say which character can stand nowhere in a design."""
    if fault.text.startswith("\ufeff"):
        return _Advice(0, "the file begins with a byte order mark; save it as UTF-8 without one")
    if fault.character and fault.character in "“”„‘’‚":
        return _Advice(fault.offset, f"{fault.character} is no quote here; write \" or '")
    if fault.character == "\r":
        return _Advice(fault.offset, "a carriage return stands alone; end lines with a line feed")
    if fault.character not in ("", "\n", "\t") and not fault.character.isprintable():
        text = f"the character U+{ord(fault.character):04X} cannot stand in a design; remove it"
        return _Advice(fault.offset, text)
    return None


def _repetition(fault: _Fault) -> _Advice | None:
    if fault.message.startswith("Duplicate"):
        return _Advice(fault.offset, "is given twice between these braces; keep one")
    if not re.match(r"Cannot (overwrite|declare|mutate|redefine)", fault.message):
        return None
    start = fault.scanner.statement
    first = {found.path: found.offset for found in reversed(fault.found) if found.offset < start}
    again = [found.path for found in fault.found if found.offset == start and found.path in first]
    if not again:
        return None
    place = f"on line {fault.line(first[again[-1]])} already"
    name = ".".join(str(key) for key in again[-1] if isinstance(key, str))
    if not fault.in_heading:
        return _Advice(start, f"{name} is given {place}; keep one")
    remedy = "rename one" if len(again[-1]) == 2 else f"write [[{name}]] over each where there may be several"
    return _Advice(start, f"[{name}] is begun {place}; keep one, or {remedy}")


def _open_text(fault: _Fault) -> _Advice | None:
    """Say which text (or quoted key) is open, or that a backslash in it is no escape."""
    if fault.message.startswith(("Unescaped", "Invalid hex", "Escaped")):
        return _Advice(fault.offset, r"a backslash in a text between double quotes is written \\")
    if not re.match(r"Unterminated|Illegal character|Found invalid|Expected [\"']{2,}", fault.message):
        return None
    start = fault.scanner.offset  # the scan stops before a text without an end
    quote = re.match(r"\"\"\"|'''|\"|'", fault.text[start : start + 3])
    if quote is None:
        return _Advice(start, "the key that begins here is not closed; end it with a quote")
    return _Advice(start, f"the text that begins here is not closed; end it with {quote[0]}")


def _open_bracket(fault: _Fault) -> _Advice | None:
    """Say which list or table is open: the next statement, or the end, stands inside it."""
    if len(fault.scanner.brackets) == 1:
        return None
    bracket = fault.scanner.brackets[-1]
    line = fault.text[: fault.offset].rpartition("\n")[2]
    next_line = not line.strip() and fault.line(bracket.offset) < fault.line(fault.offset)
    if bracket.elements is None and fault.character in ("", "\n"):
        return _Advice(bracket.offset, "the table that begins here is not closed on its line; end it with }")
    if not fault.character or (next_line and _STATEMENT.match(fault.text, fault.offset)):
        return _Advice(bracket.offset, "the list that begins here is not closed; end it with ]")
    if fault.message.startswith("Invalid initial") and fault.character == "}":
        return _Advice(fault.offset, "no comma stands before the closing }; remove it")
    return None


def _heading(fault: _Fault) -> _Advice | None:
    if not fault.in_heading:
        return None
    if fault.message.startswith("Expected newline"):
        return _Advice(fault.offset, "nothing may follow a heading on its line")
    return _Advice(fault.offset, "the heading is not whole; write it like [shop], [[hanging]] or [support.P3]")


def _key(fault: _Fault) -> _Advice | None:
    """Say what is wrong with a key, or that none is followed by its equals sign."""
    if re.match("Invalid (statement|initial)", fault.message):
        return _Advice(fault.offset, "a key is missing here; write key = value")
    if not fault.message.startswith("Expected '='"):
        return None
    start = fault.scanner.offset  # the scan stops before a key without a value
    key, equals, _ = fault.written(start).partition("=")
    if equals and " " in key.strip():
        plain = re.sub(r"[^A-Za-z0-9]+", "_", key.strip())
        return _Advice(start, f"a key has no spaces; write {plain} = ...")
    if equals:
        return _Advice(start, f"a key has letters from a to z, figures, _ and -; write {say(key.strip())} = ...")
    return _Advice(start, f"{say(key.strip())} has no equals sign; write key = value")


def _value(fault: _Fault) -> _Advice | None:
    """Say how a value, or a list of them, should have been written."""
    if fault.message.startswith("Invalid value"):
        return _Advice(fault.offset, _value_meant(fault.written(fault.offset)))
    if not fault.message.startswith(("Expected newline", "Unclosed")):
        return None
    rest = fault.written(fault.offset)
    if re.search(r"[\]}][ \t]*\Z", fault.text[: fault.offset]):
        return _Advice(fault.offset, f"nothing may follow a value on its line; remove {say(rest)}")
    same_line = "\n" not in fault.text[fault.scanner.value : fault.offset]
    more = same_line and re.match(r"[^\W\d_][^=]*\Z|['\"%°]", rest)
    if fault.message.startswith("Unclosed") and not more:
        return _Advice(fault.offset, f"a comma is missing before {say(rest)}")
    # The value went on after what could be read of it, as in 4.2 mm or 13'-9 1/2".
    return _Advice(fault.scanner.value, _value_meant(fault.written(fault.scanner.value)))


def _value_meant(written: str) -> str:
    """Return what is wrong with a value as written, and what was probably meant."""
    if not written:
        return "a value is missing here"
    if written[0] in "\"'":
        inner = written[1:-1] if written[-1] == written[0] and len(written) > 1 else ""
        return f'a double quote within a text is written \\"{f", so: {say(inner)}" if inner else ""}'
    if written.lower() in ("true", "false", "yes", "no", "on", "off"):
        return f"{written} is no value; write true or false"
    if decimal := re.fullmatch(r"([+-]?[0-9]+),([0-9]+)( ?[^\W\d_]\w*)?", written):
        meant = f"{decimal[1]}.{decimal[2]}"
        meant = say(meant + decimal[3]) if decimal[3] else meant
        return f"{written} has a comma; write the decimal with a point, like {meant}"
    if re.fullmatch(r"[+-]?(\.[0-9]+|[0-9]+\.)", written):
        return f"{written} is no number; a point has figures on both sides, like 0.5"
    if re.fullmatch(r"[+-]?0[0-9.]+", written):
        return f"{written} is no number; it begins with a nought"
    if re.search(r"[,=]", written):
        return f"{say(written)} is no value; write one value, and each key on its own line"
    if not re.search(r"[^\W\d_]|['\"%°]", written):
        return f"{say(written)} is no value"
    return f"a text, and a number with a unit, stands in quotes: {say(written)}"


_RULES = (_character, _repetition, _open_text, _open_bracket, _heading, _key, _value)
