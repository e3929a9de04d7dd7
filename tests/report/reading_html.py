"""Reads a page back with the standard library: elements, attributes, texts; and refuses unbalanced tags."""

from __future__ import annotations

from dataclasses import dataclass, field
from html.parser import HTMLParser

VOID = {"meta", "br", "col", "hr", "link", "img", "input"}


@dataclass
class Element:
    name: str
    attributes: dict[str, str]
    children: list[Element] = field(default_factory=list)
    own_text: str = ""

    def all(self, *names: str) -> list[Element]:
        found = [self] if not names or self.name in names else []
        return found + [one for child in self.children for one in child.all(*names)]

    @property
    def text(self) -> str:
        return " ".join([self.own_text, *(child.text for child in self.children)])


class Reader(HTMLParser):
    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.open = [Element("", {})]

    def handle_starttag(self, tag, attrs):
        element = Element(tag, {key: value or "" for key, value in attrs})
        self.open[-1].children.append(element)
        if tag not in VOID:
            self.open.append(element)

    def handle_endtag(self, tag):
        assert self.open[-1].name == tag, f"</{tag}> closes <{self.open[-1].name}>"
        self.open.pop()

    def handle_data(self, data):
        self.open[-1].own_text += data


def read(page: str) -> Element:
    reader = Reader()
    reader.feed(page)
    reader.close()
    assert len(reader.open) == 1, f"<{reader.open[-1].name}> is never closed"
    return reader.open[0]


def words(element: Element) -> str:
    return " ".join(element.text.split())
