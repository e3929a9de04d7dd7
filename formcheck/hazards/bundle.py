"""formcheck's own rules as one JSON file, so that a check need not parse hundreds of YAML files.

Each entry carries the digest of the file it was made from; a file whose digest differs is read itself,
so that the bundle can be late but never wrong. Made by scripts/build_rule_book.py.
"""

from __future__ import annotations

import json
from hashlib import sha256
from pathlib import Path
from typing import Any

from formcheck.documents import Document, decode, parse_yaml, read_bytes

BUNDLE = Path(__file__).parent / "data" / "book.json"


def read_bundle(path: Path = BUNDLE) -> dict[str, Any]:
    """Digest of a rule file -> its data; empty where there is no bundle."""
    if not path.is_file():
        return {}
    return json.loads(path.read_text(encoding="utf-8"))


def read_document(path: Path, bundle: dict[str, Any], *, most_bytes: int, what: str) -> Document:
    """A file of the rule book: out of the bundle when it is the same to the byte, else parsed."""
    raw = read_bytes(path, most_bytes=most_bytes, what=what)
    if bundle and (data := bundle.get(digest(raw))) is not None:
        return Document(str(path), data, {})
    return parse_yaml(decode(raw, str(path)), str(path))


def digest(raw: bytes) -> str:
    return sha256(raw).hexdigest()


def bundle_of(files: list[Path]) -> dict[str, Any]:
    """The bundle that holds these files."""
    raws = [path.read_bytes() for path in files]
    return {digest(raw): parse_yaml(decode(raw, str(path)), str(path)).data
            for path, raw in zip(files, raws, strict=True)}
