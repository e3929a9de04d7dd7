"""Parts that every terminal view is set from: headings, labelled lines, tables, swatches.

Text goes in as `Text`, never as markup, so that nothing a user wrote is taken for a command.
"""

from __future__ import annotations

import textwrap
from collections.abc import Iterable, Iterator, Sequence
from contextlib import contextmanager

from rich.cells import cell_len
from rich.console import Console
from rich.text import Text

from formcheck.check.record import Grade
from formcheck.report.words import clean

LEAST_WIDTH = 12  # cells of text, however narrow the terminal
LEAST_COLUMN, GAP, TABLE_INDENT = 4, 2, 2
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
    lines = wrapped(clean(text), console.width - indent)
    _print_lines(console, [Text(" " * indent + line, style=style) for line in lines])


def wrapped(text: str, width: int) -> list[str]:
    """Lines of at most `width` cells; words too long for one are folded. At least one line.

    A page of findings has hundreds of these: rich's own layout takes ten times as long over them.
    """
    width = max(width, LEAST_COLUMN)
    if cell_len(text) != len(text):  # wide signs: leave the counting to rich
        whole = Text(text).wrap(Console(width=width), width)
        return [line.plain.rstrip() for line in whole] or [""]
    lines = [line for part in text.splitlines()
             for line in textwrap.wrap(part, width, break_on_hyphens=False) or [""]]
    return lines or [""]


def _print_lines(console: Console, lines: Sequence[Text]) -> None:
    console.print(Text("\n").join(lines), soft_wrap=True)


def labelled(console: Console, rows: Iterable[tuple[str, str]], *, indent: int = 2,
             width: int | None = None) -> None:
    """Label and text, the text hanging clear of the labels. Long names such as paths fold, not vanish."""
    rows = [(clean(label), clean(text)) for label, text in rows]
    if not rows:
        return
    wide = width or max(cell_len(label) for label, _ in rows)
    lines = []
    for label, text in rows:
        labels = wrapped(label, max(wide, cell_len(label) if wide < LEAST_WIDTH else wide))
        texts = wrapped(text, console.width - indent - wide - 1)
        for n in range(max(len(labels), len(texts))):
            left, right = labels[n] if n < len(labels) else "", texts[n] if n < len(texts) else ""
            lines.append(Text(f"{' ' * indent}{left}{' ' * (wide - cell_len(left))} {right}".rstrip()))
    _print_lines(console, lines)


def table(console: Console, columns: Sequence[str | tuple[str, str]],
          rows: Iterable[Sequence[str | Text]]) -> None:
    """A plain table; a column given as (name, "right") is set flush right, as (name, "whole") kept whole."""
    names = [column if isinstance(column, str) else column[0] for column in columns]
    kinds = ["left" if isinstance(column, str) else column[1] for column in columns]
    cells = [[cell if isinstance(cell, Text) else clean(cell) for cell in row] for row in rows]
    widths = _column_widths(names, kinds, cells, console.width - TABLE_INDENT)
    lines = _row_lines([Text(name) for name in names], kinds, widths, style="underline")
    for row in cells:
        lines += _row_lines(row, kinds, widths)
    _print_lines(console, lines)


def _column_widths(names: Sequence[str], kinds: Sequence[str], cells: Sequence[Sequence[str | Text]],
                   width: int) -> list[int]:
    """As wide as the longest cell; the widest columns that may fold give way until all fit."""
    widths = [max([cell_len(name), *(cell_len(str(row[n])) for row in cells)]) for n, name in enumerate(names)]
    while sum(widths) + GAP * (len(widths) - 1) > width:
        able = [n for n, kind in enumerate(kinds) if kind != "whole" and widths[n] > LEAST_COLUMN]
        if not able:
            break
        widths[max(able, key=lambda n: widths[n])] -= 1
    return widths


def _row_lines(row: Sequence[str | Text], kinds: Sequence[str], widths: Sequence[int], *,
               style: str = "") -> list[Text]:
    """One row as lines of text, its cells folded to their widths."""
    folded = [_folded(cell, width, style) for cell, width in zip(row, widths, strict=True)]
    lines = []
    for n in range(max(len(cell) for cell in folded)):
        line = Text(" " * TABLE_INDENT)
        for place, (cell, kind, width) in enumerate(zip(folded, kinds, widths, strict=True)):
            part = cell[n] if n < len(cell) else Text("")
            space = " " * (width - cell_len(part.plain))
            line.append(" " * GAP if place else "")
            line.append_text(Text(space) + part if kind == "right" else part + Text(space))
        line.rstrip()
        lines.append(line)
    return lines


def _folded(cell: str | Text, width: int, style: str) -> list[Text]:
    if isinstance(cell, Text) and not style:
        return [cell]  # a swatch keeps its colours and its length
    return [Text(line, style=style) for line in wrapped(str(cell), width)]


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
