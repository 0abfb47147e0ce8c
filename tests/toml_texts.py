"""Random TOML that knows where it has put each key: every way of writing a table, and every trap for a scanner."""

from __future__ import annotations

from itertools import count
from random import Random

from geom.design.positions import KeyPath

KEYS = [
    ("sag", "sag"),
    ("my_chain-2", "my_chain-2"),
    ("0", "0"),
    ('"a b"', "a b"),
    ("'c.d'", "c.d"),
    ('"#]="', "#]="),
    ('"\\u00e9\\"\\\\"', 'é"\\'),
    ("''", ""),
    ("' \" '", ' " '),
]
SCALARS = [
    "1",
    "-4.5e-3",
    "true",
    "inf",
    "0xff",
    "1979-05-27",
    "1979-05-27 07:32:00Z",
    "07:32:00.5",
    '"4.2 m"',
    '""',
    "''",
    '"13\'-9 1/2\\""',
    '"[[hanging]] # } \\\\"',
    "'\\'",
    "'] , = \"'",
    '"""a "" \\""" b"""',
    '"""\nsag = 1 # [\n""b"""""',
    '"""\\\n   \\\\"""',
    '""""""',
    "'''\n[shop]\n'' \\'''",
    "'''it''''",
]


class Text:
    """A TOML text as it is written, with the line of each path."""

    def __init__(self, seed: int) -> None:
        self.random = Random(seed)
        self.text = ""
        self.lines: dict[KeyPath, int] = {}
        self._names = count()
        for _ in range(self.random.randrange(4)):
            self._pair((), "\n")
        for _ in range(self.random.randrange(5)):
            self._section()
        if self.random.random() < 0.3:
            self.text = self.text.replace("\n", "\r\n")

    def _put(self, *parts: str) -> None:
        self.text += "".join(parts)

    def _mark(self, path: KeyPath, *, stated: bool = True) -> None:
        """Note that a path begins here: where it is stated, else where it is first implied."""
        if stated or path not in self.lines:
            self.lines[path] = self.text.count("\n") + 1

    def _spaces(self) -> str:
        return self.random.choice(["", " ", "\t", "  "])

    def _comment(self) -> str:
        return self.random.choice(["", "# plain", "# [[no]] = \"' {", "#"])

    def _blank(self, newline: str = "\n") -> str:
        """Return space that may hold line ends and comments, where those are allowed."""
        lines = self.random.choice([0, 0, 1, 2]) if newline else 0
        return "".join(f"{self._spaces()}{self._comment()}{newline}" for _ in range(lines)) + self._spaces()

    def _key(self) -> tuple[str, str]:
        """Return a key as written and as meant, met nowhere else in the text."""
        written, meant = self.random.choice(KEYS)
        name = f"k{next(self._names)}"
        if written[-1] in "\"'":
            return f"{written[:-1]}{name}{written[-1]}", meant + name
        return written + name, meant + name

    def _dotted(self, path: KeyPath) -> tuple[str, KeyPath]:
        """Return up to three keys with points between; all but the last are implied."""
        keys = [self._key() for _ in range(self.random.choice([1, 1, 1, 2, 3]))]
        for n in range(1, len(keys)):
            self._mark((*path, *(meant for _, meant in keys[:n])), stated=False)
        written = f"{self._spaces()}.{self._spaces()}".join(key for key, _ in keys)
        return written, (*path, *(meant for _, meant in keys))

    def _pair(self, path: KeyPath, newline: str) -> None:
        self._put(self._blank(newline))
        written, whole = self._dotted(path)
        self._mark(whole)
        self._put(written, self._spaces(), "=", self._spaces())
        self._value(whole, depth=0)
        if newline:
            self._put(" ", self._comment(), newline)

    def _value(self, path: KeyPath, depth: int) -> None:
        form = self.random.choice(["scalar", "scalar", "array", "table"]) if depth < 3 else "scalar"
        if form == "scalar":
            self._put(self.random.choice(SCALARS))
        elif form == "array":
            self._array(path, depth)
        else:
            self._braces(path)

    def _array(self, path: KeyPath, depth: int) -> None:
        self._put("[", self._blank())
        size = self.random.randrange(4)
        for n in range(size):
            self._mark((*path, n))
            self._value((*path, n), depth + 1)
            comma = n + 1 < size or self.random.random() < 0.5
            self._put(self._blank(), "," if comma else "", self._blank())
        self._put("]")

    def _braces(self, path: KeyPath) -> None:
        self._put("{", self._spaces())
        for n in range(self.random.randrange(3)):
            self._put("," if n else "")
            self._pair(path, "")
            self._put(self._spaces())
        self._put("}")

    def _section(self) -> None:
        """Write a table, a table under one that comes later, or an array of tables with tables in it."""
        written, meant = self._key()
        form = self.random.choice(["table", "named", "array"])
        if form == "table":
            self._heading(f"[{written}]", (meant,))
        elif form == "named":
            under, name = self._key()
            self._put(self._blank("\n"))
            self._mark((meant,), stated=False)
            self._heading(f"[ {written} . {under} ]", (meant, name))
            if self.random.random() < 0.5:
                self._heading(f"[{written}]", (meant,))
        else:
            self._tables(written, meant)

    def _tables(self, written: str, meant: str) -> None:
        under, name = self._key()
        for n in range(self.random.randrange(1, 4)):
            self._put(self._blank("\n"))
            self._mark((meant,), stated=False)
            self._heading(f"[[{written}]]", (meant, n))
            for m in range(self.random.randrange(3)):
                self._put(self._blank("\n"))
                self._mark((meant, n, name), stated=False)
                self._heading(f"[[{written}.{under}]]", (meant, n, name, m))

    def _heading(self, heading: str, path: KeyPath) -> None:
        self._put(self._spaces())
        self._mark(path)
        self._put(heading, self._spaces(), self._comment(), "\n")
        for _ in range(self.random.randrange(3)):
            self._pair(path, "\n")
