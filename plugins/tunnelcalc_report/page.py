"""The sheet that every figure stands on: title, facts, caution, and files of equal bytes."""

from __future__ import annotations

import textwrap
import warnings
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Any, cast

from tunnelcalc import api
from tunnelcalc_report.marks import GREY, INK, PALE

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

WIDTH_IN, HEIGHT_IN = 10.6, 7.4
LEFT, RIGHT, TOP, FOOT = 0.085, 0.965, 0.865, 0.075
LEGEND_ROW = 0.0265
"""Height of a line of the legend, of the sheet's."""
LEGEND_COLUMNS = 2
PNG_DOTS_PER_INCH = 150
LONGEST_TITLE = 92
LONGEST_PROJECT = 130
LONGEST_FACTS = 150
LONGEST_LABEL = 78
LONGEST_NOTE = 170
NOTE_LINES = 2
"""Lines of a note for which every sheet has room."""
NOTE_LINE = 0.0175
"""Height of a further one, of the sheet's."""
LONGEST_SENTENCE = 78

STYLE: dict[str, Any] = {
    "font.family": ["DejaVu Sans"],
    "font.size": 9.0,
    "text.color": INK,
    # Names are printed as they are: a dollar sign begins no formula.
    "text.parse_math": False,
    "axes.labelsize": 9.0,
    "axes.titlesize": 9.5,
    "axes.titlelocation": "left",
    "axes.titleweight": "bold",
    "axes.edgecolor": INK,
    "axes.labelcolor": INK,
    "axes.linewidth": 0.8,
    "axes.grid": True,
    "axes.axisbelow": True,
    "axes.formatter.useoffset": False,
    "axes.formatter.limits": [-6, 9],
    "axes.unicode_minus": True,
    "grid.color": PALE,
    "grid.linewidth": 0.6,
    "xtick.color": INK,
    "ytick.color": INK,
    "legend.fontsize": 8.0,
    "legend.frameon": False,
    "legend.handlelength": 4.2,
    "svg.fonttype": "path",
    # The names of parts in the file follow from this and not from chance.
    "svg.hashsalt": "tunnelcalc",
}


@contextmanager
def drawing() -> Iterator[None]:
    """Our style alone, whatever the user's own settings of matplotlib are."""
    import matplotlib as mpl

    with mpl.rc_context(), warnings.catch_warnings():
        mpl.rcdefaults()
        mpl.rcParams.update(cast("Any", STYLE))
        # A letter that the font lacks is drawn as a box; the tables hold the name as it is.
        warnings.filterwarnings("ignore", message="Glyph .* missing")
        yield


def sheet(what: str, curves: api.SectionCurves, facts: Sequence[str]) -> Figure:
    """An empty sheet: what it shows, of which project and section, and the caution."""
    # Where chainages are not metres along the axis, say which of them these are.
    plain = curves.chainage == f"{curves.chainage_m:.2f}"
    ends = f"{metres(curves.from_m)} to {metres(curves.to_m)} m"
    place = f"{curves.chainage} ({'section' if plain else 'axis'} {ends})"
    place = f"{place}, {curves.ground_unit}" if curves.ground_unit else place
    return headed(f"{what} at {place}", curves.title, facts)


def headed(head: str, title: str, facts: Sequence[str]) -> Figure:
    """An empty sheet with its head, the project's title, facts and the caution."""
    from matplotlib.figure import Figure

    figure = Figure(figsize=(WIDTH_IN, HEIGHT_IN), facecolor="white")
    head = shortened(head, LONGEST_TITLE)
    figure.text(LEFT, 0.962, head, fontsize=13, fontweight="bold", va="center")
    figure.text(LEFT, 0.932, shortened(title, LONGEST_PROJECT), fontsize=9, va="center")
    line = shortened("; ".join(facts), LONGEST_FACTS)
    figure.text(LEFT, 0.908, line, fontsize=8, va="center", color=GREY)
    figure.text(LEFT, 0.022, api.LIMITS[0], fontsize=7, va="center", color=GREY)
    return figure


def note(figure: Figure, notes: Sequence[str]) -> None:
    """What a reader must know to read the figure, above the caution."""
    if notes:
        middle = 0.055 + 0.5 * _room_for(notes)
        figure.text(LEFT, middle, "\n".join(_note_lines(notes)), fontsize=7.5, va="center")


def _note_lines(notes: Sequence[str]) -> list[str]:
    return textwrap.wrap("Note: " + "; ".join(notes) + ".", LONGEST_NOTE) if notes else []


def _room_for(notes: Sequence[str]) -> float:
    """Height that a note needs beyond its usual lines: nothing of it is cut off."""
    return NOTE_LINE * max(len(_note_lines(notes)) - NOTE_LINES, 0)


def instead(
    what: str,
    curves: api.SectionCurves,
    facts: Sequence[str],
    sentence: str,
    folder: Path,
    name: str,
) -> tuple[str, ...]:
    """A sheet that says in words why there is nothing to draw."""
    figure = sheet(what, curves, facts)
    text = "\n".join(textwrap.wrap(sentence, LONGEST_SENTENCE))
    figure.text(0.5, 0.5, text, fontsize=12, ha="center", va="center", linespacing=1.6)
    return saved(figure, folder, name)


def shortened(text: str, longest: int) -> str:
    """Text that fits on its line."""
    text = " ".join(text.split())
    return text if len(text) <= longest else text[: longest - 3] + "..."


def number(value: float) -> str:
    """A number as engineers round it: three digits, no exponent where that can be read."""
    if value != value:
        return "unknown"
    if value == 0:
        return "0"
    if abs(value) >= 1e6 or abs(value) < 1e-4:
        return f"{value:.2e}"
    text = f"{value:.3g}"
    return f"{float(text):.0f}" if "e" in text else text


def metres(value: float) -> str:
    """A length along the drive to the centimetre, without needless zeros."""
    return f"{value:.2f}".rstrip("0").rstrip(".")


def megapascals(value: float) -> str:
    """A pressure with its unit."""
    return "unknown" if value != value else f"{number(value)} MPa"


def millimetres(value: float) -> str:
    """A closure with its unit: whole millimetres, or three digits of less than a hundred."""
    if value != value:
        return "unknown"
    return f"{value:.0f} mm" if 100 <= value < 1e6 else f"{number(value)} mm"


def per_cent(share: float) -> str:
    """A share with its unit."""
    return "under 0.01 %" if 0 < share < 1e-4 else f"{number(100 * share)} %"


def legend_rows(entries: int) -> int:
    """Lines of a legend with so many entries."""
    return -(-entries // LEGEND_COLUMNS)


def legend(figure: Figure, handles: Sequence[Any], top: float) -> None:
    """One legend for the sheet, below its drawings."""
    labels = [shortened(str(handle.get_label()), LONGEST_LABEL) for handle in handles]
    figure.legend(
        list(handles),
        labels,
        loc="upper left",
        bbox_to_anchor=(LEFT - 0.01, top),
        ncols=LEGEND_COLUMNS,
        borderpad=0.0,
        columnspacing=2.0,
        labelspacing=0.45,
    )


def bottom_above_legend(entries: int, notes: Sequence[str] = ()) -> tuple[float, float]:
    """Where drawings end, and where the legend of so many entries begins below them and above
    the note."""
    top = FOOT + 0.012 + _room_for(notes) + LEGEND_ROW * legend_rows(entries)
    return top + 0.085, top


def label_axes(axes: Axes, across: str, up: str, title: str = "") -> None:
    """Quantities with units on both axes."""
    axes.set_xlabel(across)
    axes.set_ylabel(up)
    if title:
        axes.set_title(title)


def saved(figure: Figure, folder: Path, name: str) -> tuple[str, ...]:
    """Write the sheet as SVG and PNG, without date or version, and say the names."""
    svg, png = f"{name}.svg", f"{name}.png"
    figure.savefig(folder / svg, format="svg", metadata={"Date": None, "Creator": "tunnelcalc"})
    figure.savefig(
        folder / png, format="png", dpi=PNG_DOTS_PER_INCH, metadata={"Software": "tunnelcalc"}
    )
    return svg, png
