"""Parses YAML into a tree in which every value keeps its place and its text as written.

YAML's own guesses (no is False, 1:20 is 80, 2e9 is text) play no part: a scalar stays text
until a reader asks for a number or a word.
"""

from __future__ import annotations

from dataclasses import dataclass

import yaml

from tunnelcalc.errors import Problems, Where

MOST_NODES = 200_000
DEEPEST = 40
NULL_TAG = "tag:yaml.org,2002:null"
MERGE_KEY = "<<"


@dataclass(frozen=True, slots=True)
class Scalar:
    """A single value: its text, empty where nothing was written."""

    where: Where
    text: str


@dataclass(frozen=True, slots=True)
class Listing:
    """A list."""

    where: Where
    items: tuple[Tree, ...]


@dataclass(frozen=True, slots=True)
class Table:
    """A mapping; keys with their places, in order, no key twice."""

    where: Where
    entries: dict[str, tuple[Where, Tree]]


Tree = Scalar | Listing | Table


def parse(file: str, text: str, problems: Problems) -> Tree | None:
    """The tree of a YAML document; None, with a problem, where it is not YAML."""
    tab_line = next(
        (
            number
            for number, line in enumerate(text.splitlines(), 1)
            if "\t" in line[: len(line) - len(line.lstrip())] and line.strip()
        ),
        0,
    )
    if tab_line:
        problems.add(
            Where(file, tab_line, 1),
            "is indented with a tab, which YAML does not allow",
            fix="indent with spaces",
        )
        return None
    try:
        node = yaml.compose(text, Loader=yaml.SafeLoader)
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark or error.context_mark
        where = Where(file, mark.line + 1, mark.column + 1) if mark else Where(file)
        what = error.problem or error.context or "cannot be understood"
        problems.add(where, f"is not YAML: {what}", fix=_syntax_fix(what))
        return None
    except (yaml.YAMLError, RecursionError, ValueError) as error:
        what = str(error).splitlines()[0] if str(error) else type(error).__name__
        if isinstance(error, RecursionError):
            what = "it is nested too deeply"
        problems.add(
            Where(file), f"is not YAML: {what}", fix="save it as plain text with plain nesting"
        )
        return None
    if node is None:
        problems.add(Where(file), "is empty", fix="write the project into it, title first")
        return None
    return _Builder(file, problems).tree(node, 0)


def _syntax_fix(what: str) -> str:
    if "alias" in what or "anchor" in what:
        return "define the anchor before it is used"
    return "check the indentation, and put text with : or # in quotes"


class _Builder:
    """Turns nodes into trees, counting them so that aliases cannot exhaust the memory."""

    def __init__(self, file: str, problems: Problems) -> None:
        self.file = file
        self.problems = problems
        self.count = 0

    def tree(self, node: yaml.Node, depth: int) -> Tree | None:
        where = Where(self.file, node.start_mark.line + 1, node.start_mark.column + 1)
        self.count += 1
        if self.count > MOST_NODES or depth > DEEPEST:
            if self.count <= MOST_NODES + 1:
                self.problems.add(
                    where,
                    "holds more values, or deeper nesting, than a project can have",
                    allowed=f"at most {MOST_NODES} values, nested {DEEPEST} deep",
                    fix="remove aliases that repeat one another",
                )
                self.count = MOST_NODES + 2
            return None
        if isinstance(node, yaml.ScalarNode):
            return Scalar(where, "" if node.tag == NULL_TAG else node.value)
        if isinstance(node, yaml.SequenceNode):
            items = [self.tree(item, depth + 1) for item in node.value]
            return Listing(where, tuple(item for item in items if item is not None))
        return self._table(node, where, depth)

    def _table(self, node: yaml.Node, where: Where, depth: int) -> Table:
        entries: dict[str, tuple[Where, Tree]] = {}
        for key_node, value_node in node.value:
            at = Where(self.file, key_node.start_mark.line + 1, key_node.start_mark.column + 1)
            if not isinstance(key_node, yaml.ScalarNode) or key_node.value == MERGE_KEY:
                self.problems.add(
                    at, "is not a plain key", allowed="a word", fix="write the keys out"
                )
                continue
            key = key_node.value
            if key in entries:
                self.problems.add(
                    at,
                    f"stands twice, first in line {entries[key][0].line}",
                    name=f'key "{key}"',
                    fix="keep one of the two",
                )
                continue
            value = self.tree(value_node, depth + 1)
            if value is not None:
                entries[key] = (at, value)
        return Table(where, entries)
