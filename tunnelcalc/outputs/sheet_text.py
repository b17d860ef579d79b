"""A calculation sheet as text for the screen, as Markdown, as a table and as JSON."""

from __future__ import annotations

import csv
import io
import json
import math
import textwrap
from collections.abc import Callable, Iterator, Mapping

import tunnelcalc
from tunnelcalc.calculation.formula import FormulaError
from tunnelcalc.calculation.line import Sheet, SheetBlock, SheetLine
from tunnelcalc.outputs.cells import number_text

WIDTH = 80
TEXT_MARK = "Calculation sheet: "
JSON_MARK = '{"calculation_sheet": '
CSV_HEADER = ("block", "symbol", "meaning", "result", "unit", "formula", "inputs", "source")
MARKS = (TEXT_MARK, JSON_MARK, ",".join(CSV_HEADER))
"""By what a sheet that stands already is known as one."""


def sheet_text(sheet: Sheet) -> str:
    """For the screen, 80 columns wide."""
    lines = [*_wrapped(sheet.title, ""), ""]
    for block in sheet.blocks:
        lines += [*_wrapped(block.title, ""), "-" * min(len(block.title), WIDTH)]
        for line in block.lines:
            if line.on_screen:
                lines += _text_of_line(line)
        for note in block.notes:
            lines += _wrapped(note, "", "  ")
        lines.append("")
    return "\n".join([*lines, *_ending(sheet), ""])


def _text_of_line(line: SheetLine) -> Iterator[str]:
    value = f"{line.symbol} = {_shown(line.result)}{f' {line.unit}' if line.unit else ''}"
    source = f" [{line.source}]" if line.source and not line.formula else ""
    yield from _wrapped(f"{value}   {line.meaning}{source}", "", "      ")
    if not line.formula:
        return
    equation = " = " in line.formula
    yield from _wrapped(line.formula, "    from " if equation else "    = ", "      ")
    put_in = ", ".join(f"{name} = {number_text(x)}" for name, x in line.inputs.items())
    if put_in:
        yield from _wrapped(put_in, "    with ", "         ")
    if line.source:
        yield from _wrapped(line.source, "    ", "    ")


def _wrapped(text: str, first: str, further: str = "") -> list[str]:
    return textwrap.wrap(
        text,
        WIDTH,
        initial_indent=first,
        subsequent_indent=further,
        break_long_words=True,
        break_on_hyphens=False,
    )


def _shown(value: float) -> str:
    return number_text(value) or "none"


def _ending(sheet: Sheet) -> Iterator[str]:
    """What was compared, and every difference."""
    if not sheet.differences:
        yield from _wrapped(
            "Checked: every formula gives its result, and the tables of the run hold what was "
            "computed here.",
            "",
        )
        return
    yield f"{len(sheet.differences)} differences"
    for difference in sheet.differences:
        yield from _wrapped(difference, "- ", "  ")


def sheet_markdown(sheet: Sheet) -> str:
    """A document with a table a block."""
    parts = [f"# {sheet.title}"]
    for block in sheet.blocks:
        parts.append(f"## {block.title}")
        if block.lines:
            parts.append("\n".join(_markdown_table(block)))
        if block.notes:
            parts.append("\n".join(f"- {_escaped(note)}" for note in block.notes))
    parts += ["## Checked", "\n".join(_ending(sheet))]
    return "\n\n".join(parts) + "\n"


def _markdown_table(block: SheetBlock) -> Iterator[str]:
    yield "| symbol | meaning | formula | numbers put in | result | unit | source |"
    yield "| --- | --- | --- | --- | --- | --- | --- |"
    for line in block.lines:
        put_in = ", ".join(f"{name} = {number_text(x)}" for name, x in line.inputs.items())
        formula = f"`{line.formula}`" if line.formula else ""
        cells = (line.symbol, line.meaning, "", put_in, _shown(line.result), line.unit, line.source)
        texts = [_escaped(cell) for cell in cells]
        texts[2] = formula
        yield f"| {' | '.join(texts)} |"


def _escaped(text: str) -> str:
    for letter in "\\`*_|<>":
        text = text.replace(letter, f"\\{letter}")
    return text.replace("\n", " ")


def sheet_csv(sheet: Sheet) -> str:
    """A row a line; numbers with all their digits. Notes and differences have no symbol."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(CSV_HEADER)
    for block in sheet.blocks:
        for line in block.lines:
            put_in = "; ".join(f"{name}={value!r}" for name, value in line.inputs.items())
            result = "" if math.isnan(line.result) else repr(line.result)
            told = (line.symbol, line.meaning, result, line.unit, line.formula, put_in, line.source)
            writer.writerow((block.title, *told))
        for note in block.notes:
            writer.writerow((block.title, "", note, "", "", "", "", ""))
    for difference in sheet.differences:
        writer.writerow(("Differences", "", difference, "", "", "", "", ""))
    return text.getvalue()


def sheet_json(sheet: Sheet) -> str:
    """For other programs; numbers with all their digits, null where there is none."""
    record = {
        "calculation_sheet": tunnelcalc.__version__,
        "title": sheet.title,
        "blocks": [
            {
                "title": block.title,
                "lines": [_record(line) for line in block.lines],
                "notes": list(block.notes),
            }
            for block in sheet.blocks
        ],
        "differences": list(sheet.differences),
    }
    return (
        json.dumps(record, indent=1, ensure_ascii=False, allow_nan=False).replace("{\n ", "{", 1)
        + "\n"
    )


def _record(line: SheetLine) -> dict[str, object]:
    try:
        recomputed = [_finite(value) for value in line.recomputed()]
    except FormulaError:
        recomputed = []
    return {
        "symbol": line.symbol,
        "meaning": line.meaning,
        "formula": line.formula,
        "inputs": {name: _finite(value) for name, value in line.inputs.items()},
        "result": _finite(line.result),
        "unit": line.unit,
        "source": line.source,
        "sides": recomputed if line.formula else [],
    }


def _finite(value: float) -> float | None:
    return value if math.isfinite(value) else None


FORMS: Mapping[str, Callable[[Sheet], str]] = {
    ".md": sheet_markdown,
    ".csv": sheet_csv,
    ".json": sheet_json,
}
"""How a sheet is written, by the ending of its file."""
