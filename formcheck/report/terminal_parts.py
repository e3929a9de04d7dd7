"""Parts that every terminal view is set from: headings, labelled lines, tables, swatches.

Text goes in as `Text`, never as markup, so that nothing a user wrote is taken for a command.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from contextlib import contextmanager

from rich.console import Console
from rich.padding import Padding
from rich.table import Table
from rich.text import Text

from formcheck.check.record import Grade
from formcheck.report.words import clean

GRADE_STYLES: dict[Grade, str] = {"stop": "bold red", "hold": "bold magenta", "care": "bold",
                                  "note": "bold", "unknown": "bold"}
# For terminals and pipes that cannot carry these signs.
PLAIN_SIGNS = str.maketrans({
    "±": "+-", "−": "-", "×": "x", "·": "|", "°": " deg", "µ": "u", "Δ": "d", "²": "2", "³": "3", "ε": "eps",
    "λ": "lambda", "■": "#", "◆": "!", "▲": "^", "●": "*", "⁻": "^-", "⁰": "0", "¹": "1", "⁴": "4", "⁵": "5",
    "⁶": "6", "⁷": "7", "⁸": "8", "⁹": "9", "→": "->", "≤": "<=", "≥": ">=", "…": "...", "—": "--", "–": "-",
    "─": "-", "↑": "^", "↓": "v", "∞": "inf",
})


@contextmanager
def speaking(console: Console | None) -> Iterator[Console]:
    """The console to print to. Where its encoding carries no such signs, they are put in plain ones."""
    console = console or Console(highlight=False)
    encoding = console.encoding or "ascii"
    if encoding.lower().replace("-", "").startswith("utf"):
        yield console
        return
    with console.capture() as captured:
        yield console
    text = captured.get().translate(PLAIN_SIGNS)
    console.file.write(text.encode(encoding, "replace").decode(encoding))


def heading(console: Console, text: str, beside: str = "") -> None:
    line = Text(clean(text), style="bold")
    if beside:
        line.append(f"  {clean(beside)}", style="not bold")
    console.print()
    console.print(line)


def paragraph(console: Console, text: str, *, indent: int = 2, style: str = "") -> None:
    console.print(Padding(Text(clean(text), style=style), (0, 0, 0, indent), expand=False))


def labelled(console: Console, rows: Iterable[tuple[str, str]], *, indent: int = 2,
             width: int | None = None) -> None:
    """Label and text, the text hanging clear of the labels. Long names such as paths fold, not vanish."""
    rows = list(rows)
    if not rows:
        return
    grid = Table.grid(padding=(0, 1, 0, 0))
    grid.add_column(width=width or max(len(label) for label, _ in rows), no_wrap=width is not None)
    grid.add_column(overflow="fold")
    for label, text in rows:
        grid.add_row(Text(clean(label)), Text(clean(text)))
    console.print(Padding(grid, (0, 0, 0, indent), expand=False))


def table(console: Console, columns: Sequence[str | tuple[str, str]],
          rows: Iterable[Sequence[str | Text]]) -> None:
    """A plain table; a column given as (name, "right") is set flush right, as (name, "whole") kept whole."""
    drawn = Table(box=None, pad_edge=False, padding=(0, 2, 0, 0), header_style="underline", show_edge=False)
    for column in columns:
        name, justify = (column, "left") if isinstance(column, str) else column
        drawn.add_column(name, justify="right" if justify == "right" else "left", overflow="fold",
                         no_wrap=justify == "whole")
    for row in rows:
        drawn.add_row(*(cell if isinstance(cell, Text) else Text(clean(cell)) for cell in row))
    console.print(Padding(drawn, (0, 0, 0, 2), expand=False))


def shows_colour(console: Console) -> bool:
    return console.color_system is not None and not console.no_color


def block(hex_text: str | None, width: int) -> Text:
    """A stretch of one colour; blank cells where there is none to show."""
    return Text(" " * width, style=f"on {hex_text}" if hex_text else "")


def strip(console: Console, hexes: Sequence[str | None], *, width: int, height: int = 1, indent: int = 2,
          beside: Sequence[str] = ()) -> None:
    """Swatches side by side without a gap, so that the eye compares at the edge. Nothing without colour.

    `beside` are lines of text to the right of the swatches, such as their hex values.
    """
    if not shows_colour(console) or not hexes:
        return
    each = max(1, min(width, (console.width - indent) // len(hexes)))
    swatches = Text("").join(block(one, each) for one in hexes)
    for row in range(height):
        text = clean(beside[row]) if row < len(beside) else ""
        console.print(Text(" " * indent) + swatches + Text(f"  {text}" if text else ""),
                      no_wrap=True, overflow="ellipsis")


def colour_warning(console: Console) -> str:
    """What to know where the terminal cannot show the colours as they are."""
    if not shows_colour(console) or console.color_system == "truecolor":
        return ""
    return "this terminal has few colours, so its swatches are visibly off; the hex values hold"
