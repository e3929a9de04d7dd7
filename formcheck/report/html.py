"""HTML and SVG by small functions: every text is escaped unless this module made it."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from html import escape

from formcheck.report.words import clean

VOID = {"meta", "br", "col", "hr", "link"}


class Markup(str):
    """Text that is HTML already. Only `tag` and `joined` make it."""


Column = str | tuple[str, str]  # a name; or a name and the class of its cells, such as "number"
Child = str | None | Iterable["Child"]


def tag(name: str, /, *children: Child, **attributes: object) -> Markup:
    """`tag("p", "a < b", class_="note")`: children escaped, None skipped, `_` in attributes is `-`."""
    written = "".join(_attribute(key, value) for key, value in attributes.items())
    if name in VOID:
        return Markup(f"<{name}{written}>")
    return Markup(f"<{name}{written}>{joined(*children)}</{name}>")


def joined(*children: Child) -> Markup:
    """Children one after the other, without an element about them."""
    return Markup("".join(_child(child) for child in children))


def table(caption: str, columns: Sequence[Column], rows: Iterable[Sequence[Child]], *,
          class_: str | None = None) -> Markup:
    """A table with a caption, column heads and, in its first column, row heads.

    On narrow pages each row becomes a small list, every cell led by the name of its column (see page.css);
    the roles are written out so that it stays a table to who hears it. Wider still, it scrolls within its
    own frame, which the keyboard reaches.
    """
    names = [column if isinstance(column, str) else column[0] for column in columns]
    kinds = [None if isinstance(column, str) else column[1] for column in columns]
    head = [tag("th", name, scope="col", role="columnheader", class_=kind)
            for name, kind in zip(names, kinds, strict=True)]
    body = [tag("tr", _row_head(row[0], kinds[0]), map(_cell, row[1:], names[1:], kinds[1:]), role="row")
            for row in rows]
    if not body:
        return tag("p", f"{caption}: none.")
    drawn = tag("table", tag("caption", caption), tag("thead", tag("tr", head, role="row"), role="rowgroup"),
                tag("tbody", body, role="rowgroup"), role="table", class_=class_)
    return tag("div", drawn, class_="frame", role="group", aria_label=caption, tabindex="0")


def definitions(pairs: Iterable[tuple[str, Child]], *, class_: str = "pairs") -> Markup:
    """Label and text, as a description list."""
    return tag("dl", [tag("div", tag("dt", label), tag("dd", text)) for label, text in pairs], class_=class_)


def section(level: int, title: Child, *children: Child, id: str, class_: str | None = None) -> Markup:
    """A section under a heading of that level."""
    return tag("section", tag(f"h{level}", title), children, id=id, class_=class_)


def _row_head(cell: Child, kind: str | None) -> Markup:
    return tag("th", cell, scope="row", role="rowheader", class_=kind)


def _cell(cell: Child, name: str, kind: str | None) -> Markup:
    """A cell; its content is one box, so that the name of its column can stand beside it."""
    content = tag("span", cell) if joined(cell) else None
    return tag("td", content, role="cell", class_=kind, data_label=name)


def _child(child: Child) -> str:
    if child is None:
        return ""
    if isinstance(child, Markup):
        return child
    if isinstance(child, str):
        return escape(clean(child))
    return "".join(_child(one) for one in child)


def _attribute(key: str, value: object) -> str:
    if value is None or value is False:
        return ""
    name = key.rstrip("_").replace("_", "-")
    return f" {name}" if value is True else f' {name}="{escape(clean(value))}"'
