"""The sheet that every page is printed on: one HTML file that asks nothing of any other place.

Its policy lets in one style sheet, known by its hash, and nothing else: no script, picture, font or request.
"""

from __future__ import annotations

import base64
import hashlib
from collections.abc import Callable
from functools import lru_cache
from pathlib import Path

from formcheck.report.html import Child, Markup, joined, tag

WIDE, NARROW = (760, 300), (340, 250)


def document(title: str, *body: Child) -> str:
    """A whole page: `body` is everything from header to footer."""
    css = style_sheet()
    head = tag(
        "head",
        tag("meta", charset="utf-8"),
        tag("meta", http_equiv="Content-Security-Policy", content=policy(css)),
        tag("meta", name="viewport", content="width=device-width, initial-scale=1"),
        tag("meta", name="referrer", content="no-referrer"),
        tag("meta", name="color-scheme", content="light dark"),
        tag("title", title),
        tag("style", Markup(css)),
    )
    return f"<!doctype html>\n{tag('html', head, tag('body', *body), lang='en')}\n"


def policy(css: str) -> str:
    """The content security policy of a page with this style sheet."""
    digest = base64.b64encode(hashlib.sha256(css.encode("utf-8")).digest()).decode("ascii")
    return f"default-src 'none'; style-src 'sha256-{digest}'; base-uri 'none'; form-action 'none'"


@lru_cache(maxsize=1)
def style_sheet() -> str:
    return Path(__file__).with_name("page.css").read_text(encoding="utf-8").strip()


def at_both_widths(draw: Callable[[int, int, str], Markup]) -> Markup:
    """A drawing for wide pages and print, and one for narrow ones: text in it keeps its size.

    `draw` takes width, height and an ending for ids; only one of the two is ever displayed or read aloud.
    """
    return joined(tag("div", draw(*WIDE, "w"), class_="only-wide"),
                  tag("div", draw(*NARROW, "n"), class_="only-narrow"))
