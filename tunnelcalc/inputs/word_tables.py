"""Tables by which a project adds words to a choice of a support kind.

`tables: {steel_sets: {profile: sections.csv}}` names one: each row is a further word of that
parameter, and states the values that the word stands for. What columns there are, and what fits
together in a row, the kind declares.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

import numpy as np

from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.table_columns import TypedTable
from tunnelcalc.inputs.typed_table import open_table, typed_columns
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Parameter, WordTable, source_of
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.project import AddedWords
from tunnelcalc.text import quoted

TABLES = "tables"
SOURCE = "source"
RowValues = Mapping[str, float | str]


@dataclass(slots=True)
class Words:
    """The words that a table adds, each with the values of its row; None where a problem of that
    row is told. `unread`: a problem of the whole table is told, and any word may be meant."""

    path: str = ""
    rows: dict[str, RowValues | None] = field(default_factory=dict)
    unread: bool = False
    chosen: set[str] = field(default_factory=set)

    def choose(self, word: str) -> RowValues | None:
        """The values of a word."""
        self.chosen.add(word)
        return self.rows[word]


WordTables = Mapping[tuple[str, str], Words]
"""By kind and parameter."""


def read_word_tables(reader: Reader, folder: ProjectFolder, registry: Registry) -> WordTables:
    """Every table that the project names, whether an element makes use of it or not."""
    tables = reader.table_of(TABLES, required=False)
    found: dict[tuple[str, str], Words] = {}
    if tables is None:
        return found
    for name in registry.names("support_kind"):
        kind = registry.support_kind(name)
        declared = [p for p in kind.parameters if p.words_from is not None]
        of_kind = tables.table_of(name, required=False) if declared else None
        if of_kind is None:
            continue
        for parameter in declared:
            path = of_kind.text(parameter.name, "the path of a table", required=False)
            if path is not None:
                found[name, parameter.name] = _words(
                    of_kind, kind, parameter, path, folder, registry
                )
        of_kind.finish()
    tables.finish()
    return found


def added_words(tables: WordTables) -> AddedWords:
    """The words of tables in which nothing is wrong."""
    return {
        place: {word: row for word, row in words.rows.items() if row is not None}
        for place, words in tables.items()
    }


def idle_tables(tables: WordTables) -> Iterator[str]:
    """Tables of which no element names a row."""
    for (kind, parameter), words in tables.items():
        if not words.chosen:
            yield f"{TABLES}: {words.path} is used by nothing: no {parameter} of {kind} names a row"


def _words(
    reader: Reader,
    kind: SupportKind,
    parameter: Parameter,
    path: str,
    folder: ProjectFolder,
    registry: Registry,
) -> Words:
    declared = parameter.words_from
    assert declared is not None
    raw = open_table(
        folder, path, reader.place(parameter.name), reader.label(parameter.name), registry
    )
    if raw is None:
        return Words(path, unread=True)
    of_name = {p.name: p for p in kind.parameters}
    numbers = {name: (of_name[name].limits, of_name[name].unit) for name in declared.states}
    needed = (declared.word_column, *numbers)
    texts = (declared.word_column, SOURCE)
    table = typed_columns(raw, reader.problems, numbers, texts, required=needed)
    if not table.rows or not all(table.has(name) for name in needed):
        return Words(path, unread=True)
    words, taken = Words(path), {_plain(word): "" for word in parameter.choices}
    for row in range(table.rows):
        word = _word(table, row, declared.word_column, taken)
        values = _values(table, row, declared, kind.name)
        if word and values is not None:
            values = {**values, source_of(parameter.name): _source(table, row)}
        if word:
            words.rows[word] = values
    return words


def _plain(word: str) -> str:
    """What makes two words look alike: neither capitals nor blanks tell them apart."""
    return "".join(word.split()).casefold()


def _word(table: TypedTable, row: int, column: str, taken: dict[str, str]) -> str:
    """The word of a row; empty, with a problem, where it is none or taken."""
    word = str(table.texts[column][row])
    if not word:
        _complain(table, row, column, "is empty", "give the row a name of its own")
        return ""
    first = taken.get(_plain(word))
    if first is not None:
        why = f"stands already at {first}" if first else "is a word of the program's own"
        message = f"holds {quoted(word)}, which {why}"
        _complain(table, row, column, message, "give the row a name that no other has")
        return ""
    taken[_plain(word)] = str(table.place(row))
    return word


def _values(
    table: TypedTable, row: int, declared: WordTable, kind_name: str
) -> dict[str, float | str] | None:
    """The numbers of a row; None, with a problem, where one is missing or they do not fit."""
    values = {name: float(table.numbers[name][row]) for name in declared.states}
    for name, value in values.items():
        if np.isnan(value) and not table.wrong_in(name)[row]:
            _complain(table, row, name, "is empty", "write the value")
    if any(np.isnan(value) for value in values.values()):
        return None
    try:
        misfits = list(declared.misfits(values))
    except Exception as error:  # a stranger's plugin may raise anything
        table.problems.add(
            table.place(row),
            f"cannot be checked: the plugin of {kind_name} failed with {describe(error)}",
            fix="report the fault to the maker of the plugin",
        )
        return None
    for misfit in misfits:
        _complain(table, row, misfit.parameter, misfit.message, misfit.fix)
    return None if misfits else dict(values)


def _source(table: TypedTable, row: int) -> str:
    """Table, line and, where the row states it, the source: for the calculation sheet."""
    stated = str(table.texts[SOURCE][row]) if table.has(SOURCE) else ""
    return str(table.place(row)) + (f", {stated}" if stated else "")


def _complain(table: TypedTable, row: int, name: str, message: str, fix: str) -> None:
    table.problems.add(table.place(row, name), message, name=f'column "{name}"', fix=fix)
