"""Parses YAML into a tree in which every value keeps its place and its text as written.

YAML's own guesses (no is False, 1:20 is 80, 2e9 is text) play no part: a scalar stays text
until a reader asks for a number or a word.
"""

from __future__ import annotations

from dataclasses import dataclass

import yaml

from tunnelcalc.errors import Problems, Where
from tunnelcalc.text import quoted

MOST_NODES = 200_000
DEEPEST = 40
NESTING = f"at most {MOST_NODES} values, nested {DEEPEST} deep"
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
    tab_line = _tab_indented_line(text)
    if tab_line:
        problems.add(
            Where(file, tab_line, 1),
            "is indented with a tab, which YAML does not allow",
            fix="indent with spaces",
        )
        return None
    node = _composed(file, text, problems)
    if node is None:
        return None
    builder = _Builder(file, problems)
    tree = builder.tree(node, 0)
    return None if builder.full else tree


def _tab_indented_line(text: str) -> int:
    """Number of the first line that a tab indents; 0 if there is none."""
    for number, line in enumerate(text.split("\n"), 1):
        if "\t" in line[: len(line) - len(line.lstrip())] and line.strip():
            return number
    return 0


def _composed(file: str, text: str, problems: Problems) -> yaml.Node | None:
    """The document as PyYAML sees it; None, with a problem, where it sees none."""
    try:
        node = yaml.compose(text, Loader=yaml.SafeLoader)
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark or error.context_mark
        where = Where(file, mark.line + 1, mark.column + 1) if mark else Where(file)
        what = error.problem or error.context or "cannot be understood"
        if what == "but found another document":
            what = "a second document begins here"
        problems.add(where, f"is not YAML: {what}", fix=_syntax_fix(what))
        return None
    except yaml.reader.ReaderError as error:
        where = Where(file, text.count("\n", 0, error.position) + 1)
        what = f"it holds the control character {ascii(text[error.position])[1:-1]}"
        problems.add(where, f"is not YAML: {what}", fix="remove it")
        return None
    except RecursionError:
        problems.add(Where(file), "is nested too deeply", allowed=NESTING, fix="nest less deeply")
        return None
    except (yaml.YAMLError, ValueError, OverflowError):  # PyYAML lets chr() and int() fail
        what = "is not YAML: an escape or a number in it has no meaning"
        problems.add(Where(file), what, fix="remove backslashes from texts in double quotes")
        return None
    if node is None:
        problems.add(Where(file), "is empty", fix="write the project into it, title first")
    return node


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
        self.full = False

    def tree(self, node: yaml.Node, depth: int) -> Tree | None:
        where = Where(self.file, node.start_mark.line + 1, node.start_mark.column + 1)
        self.count += 1
        if self.full:
            return None
        if self.count > MOST_NODES or depth > DEEPEST:
            self.full = True
            deep = depth > DEEPEST
            self.problems.add(
                where,
                "is nested too deeply" if deep else "begins more values than a project can have",
                allowed=NESTING,
                fix="nest less deeply" if deep else "remove aliases that repeat one another",
            )
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
                    name=f"key {quoted(key)}",
                    fix="keep one of the two",
                )
                continue
            value = self.tree(value_node, depth + 1)
            if value is not None:
                entries[key] = (at, value)
        return Table(where, entries)
