"""Reads typed values out of a YAML tree, and collects what is wrong with them."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

import numpy as np

from tunnelcalc.chainage import FORMS, ChainageError, Notation
from tunnelcalc.errors import Problems, Where
from tunnelcalc.inputs.yaml_tree import Listing, Scalar, Table, Tree
from tunnelcalc.text import as_number, meant, number_fix, quoted, suggestion, words_near
from tunnelcalc.vocabulary import Limits


class Reader:
    """Reads the keys of one mapping. `finish` then tells the keys that nobody asked for."""

    def __init__(
        self, table: Table, problems: Problems, path: str = "", notation: Notation | None = None
    ) -> None:
        self.table = table
        self.problems = problems
        self.path = path
        self.notation = notation or Notation()
        self.known: dict[str, None] = {}

    @property
    def where(self) -> Where:
        return self.table.where

    def place(self, key: str) -> Where:
        """Where a key stands, or else the mapping."""
        entry = self.table.entries.get(key)
        return entry[0] if entry else self.table.where

    def has(self, key: str) -> bool:
        return key in self.table.entries

    def is_list(self, key: str) -> bool:
        entry = self.table.entries.get(key)
        return entry is not None and isinstance(entry[1], Listing)

    def is_table(self, key: str) -> bool:
        entry = self.table.entries.get(key)
        return entry is not None and isinstance(entry[1], Table)

    def ends_in_blank(self, key: str) -> bool:
        """Whether a text has a blank at its end, which `text` takes off."""
        entry = self.table.entries.get(key)
        return entry is not None and isinstance(entry[1], Scalar) and entry[1].text.endswith(" ")

    def label(self, key: str) -> str:
        return f"key {quoted(self.path + key)}"

    def complain(self, key: str, message: str, *, fix: str, allowed: str = "") -> None:
        self.problems.add(self.place(key), message, name=self.label(key), allowed=allowed, fix=fix)

    def text(self, key: str, allowed: str = "text", required: bool = True) -> str | None:
        """A text that is not empty."""
        value = self._value(key, allowed, required)
        if value is None:
            return None
        if not isinstance(value, Scalar):
            self.complain(key, f"holds {_sort(value)}", allowed=allowed, fix="write a single value")
            return None
        if not value.text.strip():
            fix = "write a value" if required else "write a value, or remove the key"
            self.complain(key, "is empty", allowed=allowed, fix=fix)
            return None
        if not value.text.strip().isprintable():
            self.complain(
                key,
                "holds control characters or line breaks",
                allowed="printable text in one line",
                fix="write plain text",
            )
            return None
        return value.text.strip()

    def number(
        self, key: str, limits: Limits, unit: str = "", required: bool = True
    ) -> float | None:
        """A number within limits."""
        allowed = limits.describe(unit)
        text = self.text(key, allowed, required)
        if text is None:
            return None
        value = as_number(text)
        if value is None:
            self.complain(
                key,
                f"holds {quoted(text)}, which is not a number",
                allowed=allowed,
                fix=number_fix(text),
            )
            return None
        if not bool(limits.contain(np.array(value))):
            self.complain(
                key,
                f"holds {quoted(text)}, which is out of range",
                allowed=allowed,
                fix="correct the value, and check its unit",
            )
            return None
        return value

    def chainage(self, key: str, required: bool = True) -> float | None:
        """A chainage as it is written, in metres along the axis."""
        text = self.text(key, FORMS, required)
        if text is None:
            return None
        try:
            return self.notation.axis_m(text)
        except ChainageError as error:
            self.complain(
                key,
                f"holds {quoted(text)}, which {error}",
                allowed=FORMS,
                fix="write a chainage of this alignment",
            )
            return None

    def choice(
        self,
        key: str,
        choices: Sequence[str],
        required: bool = True,
        otherwise: str = "write one of the allowed words",
    ) -> str | None:
        """One of several words; `otherwise` is the advice where none is near to what is written."""
        text = self.text(key, words_near(choices), required)
        if text is None or text in choices:
            return text
        self.complain(
            key,
            f"holds {quoted(text)}",
            allowed=words_near(choices, text),
            fix=meant(text, choices) or otherwise,
        )
        return None

    def table_of(self, key: str, required: bool = True) -> Reader | None:
        """A mapping below this one."""
        value = self._value(key, "keys with values", required)
        if value is None:
            return None
        if not isinstance(value, Table):
            self.complain(
                key,
                f"holds {_sort(value)}",
                allowed="keys with values, indented below it",
                fix="write its keys on the lines below, indented",
            )
            return None
        return Reader(value, self.problems, f"{self.path}{key}.", self.notation)

    def tables_of(
        self, key: str, required: bool = True, may_be_empty: bool = True
    ) -> Iterator[Reader]:
        """The mappings of a list."""
        items = self._items(key, required)
        entry = self.table.entries.get(key)
        if not may_be_empty and entry and isinstance(entry[1], Listing) and not items:
            self.complain(key, "is an empty list", fix="write at least one entry")
        for number, item in enumerate(items, 1):
            path = f"{self.path}{key}[{number}]"
            if isinstance(item, Table):
                yield Reader(item, self.problems, f"{path}.", self.notation)
            else:
                self.problems.add(
                    item.where,
                    f"holds {_sort(item)}",
                    name=f'entry "{path}"',
                    allowed="keys with values",
                    fix="begin the entry with - and write its keys below one another",
                )

    def texts_of(self, key: str) -> Iterator[tuple[Where, str]]:
        """The texts of an optional list."""
        for number, item in enumerate(self._items(key, False), 1):
            if isinstance(item, Scalar) and item.text.strip() and item.text.strip().isprintable():
                yield item.where, item.text.strip()
            else:
                self.problems.add(
                    item.where,
                    f"holds {_sort(item)}",
                    name=f'entry "{self.path}{key}[{number}]"',
                    allowed="text",
                    fix="write a single word",
                )

    def finish(self, also_known: Iterable[str] = ()) -> None:
        """Tell every key that was not asked for, with the nearest known one."""
        known = [*self.known, *also_known]
        for key, (where, _) in self.table.entries.items():
            if key in self.known:
                continue
            hint = suggestion(key, known)
            self.problems.add(
                where,
                "is unknown",
                name=self.label(key),
                allowed=", ".join(known),
                fix=f'did you mean "{hint}"?' if hint else "remove it, or correct its name",
            )

    def _items(self, key: str, required: bool) -> tuple[Tree, ...]:
        value = self._value(key, "a list", required)
        if value is None:
            return ()
        if isinstance(value, Listing):
            return value.items
        self.complain(
            key,
            f"holds {_sort(value)}",
            allowed="a list",
            fix="begin each entry on its own line with -",
        )
        return ()

    def _value(self, key: str, allowed: str, required: bool) -> Tree | None:
        self.known[key] = None
        entry = self.table.entries.get(key)
        if entry is not None:
            return entry[1]
        if required:
            self.problems.add(
                self.table.where, "is missing", name=self.label(key), allowed=allowed, fix="add it"
            )
        return None


def _sort(value: Tree) -> str:
    if isinstance(value, Table):
        return "keys with values"
    if isinstance(value, Listing):
        return "a list"
    return quoted(value.text) if value.text else "nothing"
