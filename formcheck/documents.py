"""YAML documents with the place of every value, read so that nothing is guessed or run.

Plain YAML reads `15:3` as 903, `010` as 8 and `NO` as false, and lets aliases blow a file up.
Here a scalar is a number only when it looks like a JSON number, true and false are the only
truths, and aliases, tags, duplicate keys, deep nesting and huge files are refused.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, get_args

import yaml

from formcheck.trouble import InputError, Place, Problem, shown, suggestion, trouble

MOST_BYTES = 2_000_000
MOST_DEPTH = 24
MOST_NODES = 50_000

INTEGER = re.compile(r"[-+]?(0|[1-9][0-9]{0,29})")
DECIMAL = re.compile(r"[-+]?(0|[1-9][0-9]*)?(\.[0-9]*)?([eE][-+]?[0-9]{1,3})?")

FieldPath = tuple[str | int, ...]


@dataclass(frozen=True)
class Document:
    """What a file holds: `data` of plain dicts, lists and scalars, and where each field stands."""

    file: str
    data: Any
    places: dict[FieldPath, Place] = field(repr=False)

    def place(self, path: FieldPath) -> Place:
        """The place of a field, or of the nearest field around it."""
        while path and path not in self.places:
            path = path[:-1]
        return self.places.get(path, Place(self.file, 1, 1))


def read_bytes(path: Path | str, *, most_bytes: int = MOST_BYTES, what: str = "a file") -> bytes:
    """The bytes of a file.

    Raises
    ------
    InputError
        no such file, a folder, not readable, or larger than `most_bytes`.
    """
    path = Path(path)
    try:
        if not path.is_file():
            found = "a folder" if path.is_dir() else "no file of this name"
            raise trouble(str(path), found, what)
        size = path.stat().st_size
        if size > most_bytes:
            raise trouble(str(path), f"{size:,} bytes", f"{what} of at most {most_bytes:,} bytes")
        return path.read_bytes()
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise trouble(str(path), f"a file that cannot be read ({reason})", what) from None


def decode(raw: bytes, file: str) -> str:
    """UTF-8 text (a byte-order mark is dropped); InputError names the line of the first bad byte."""
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        raise trouble(file, f"a byte that is not UTF-8 text (0x{raw[error.start]:02x})",
                      "a text file saved as UTF-8", line=line) from None


def read_yaml(path: Path | str, *, most_bytes: int = MOST_BYTES, what: str = "a YAML file") -> Document:
    """Read one YAML document from a file; InputError with the place of what is wrong."""
    raw = read_bytes(path, most_bytes=most_bytes, what=what)
    return parse_yaml(decode(raw, str(path)), str(path))


def parse_yaml(text: str, file: str) -> Document:
    """Read one YAML document from text; `file` is the name that messages carry.

    Raises
    ------
    InputError
        not YAML, empty, more than one document, an alias, anchor or tag, a duplicate or
        non-text key, nesting deeper than `MOST_DEPTH`, more than `MOST_NODES` values.
    """
    places: dict[FieldPath, Place] = {}
    loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
    try:
        data = _Builder(file, places).build(yaml.parse(text, Loader=loader))
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark or error.context_mark
        line, column = (mark.line + 1, mark.column + 1) if mark else (None, None)
        raise trouble(file, f"text that is not YAML ({error.problem or 'unreadable'})",
                      "indented `key: value` lines", line=line, column=column) from None
    except (yaml.YAMLError, ValueError) as error:
        first_line = str(error).splitlines()[0] if str(error) else "unreadable"
        raise trouble(file, f"text that is not YAML ({first_line})", "plain text YAML") from None
    return Document(file, data, places)


class _Builder:
    """Builds plain data from YAML events. A class because the walk carries its place and counts."""

    def __init__(self, file: str, places: dict[FieldPath, Place]):
        self.file, self.places, self.nodes = file, places, 0

    def build(self, events) -> Any:
        self.events = iter(events)
        data, documents = None, 0
        for event in self.events:
            if isinstance(event, yaml.DocumentStartEvent):
                documents += 1
                if documents > 1:
                    self.refuse(event, "a second document", "one document to a file", ())
                data = self.value(next(self.events), (), 0)
        if documents == 0 or data is None:
            raise trouble(self.file, "an empty file", "`key: value` lines", line=1, column=1)
        return data

    def refuse(self, event, found: str, expected: str, path: FieldPath):
        raise InputError(Problem(self.place(event), found, expected, path_text(path)))

    def place(self, event) -> Place:
        return Place(self.file, event.start_mark.line + 1, event.start_mark.column + 1)

    def value(self, event, path: FieldPath, depth: int) -> Any:
        self.nodes += 1
        if self.nodes > MOST_NODES:
            self.refuse(event, f"more than {MOST_NODES:,} values", "a smaller file", path)
        if depth > MOST_DEPTH:
            self.refuse(event, f"nesting deeper than {MOST_DEPTH}", "flatter lists and mappings", path)
        if isinstance(event, yaml.AliasEvent):
            self.refuse(event, "an alias (*name)", "the value written out", path)
        if getattr(event, "anchor", None):
            self.refuse(event, "an anchor (&name)", "the value without it", path)
        if getattr(event, "tag", None) not in (None, "!"):
            self.refuse(event, f"a tag ({event.tag})", "the plain value", path)
        self.places[path] = self.place(event)
        if isinstance(event, yaml.ScalarEvent):
            return event.value if event.style else plain_scalar(event.value)
        if isinstance(event, yaml.SequenceStartEvent):
            return self.sequence(path, depth)
        return self.mapping(path, depth)

    def sequence(self, path: FieldPath, depth: int) -> list:
        items: list = []
        while not isinstance(event := next(self.events), yaml.SequenceEndEvent):
            items.append(self.value(event, (*path, len(items)), depth + 1))
        return items

    def mapping(self, path: FieldPath, depth: int) -> dict:
        found: dict[str, Any] = {}
        while not isinstance(event := next(self.events), yaml.MappingEndEvent):
            if not isinstance(event, yaml.ScalarEvent):
                self.refuse(event, "a key that is not a word", "`key: value` lines", path)
            key = event.value
            if key == "<<" and not event.style:
                self.refuse(event, "a merge key (<<)", "the keys written out", path)
            if key in found:
                self.refuse(event, f"the key {shown(key)} a second time", "each key once", path)
            child = (*path, key)
            found[key] = self.value(next(self.events), child, depth + 1)
            self.places[child] = self.place(event)
        return found


def plain_scalar(text: str) -> Any:
    """An unquoted scalar as JSON would read it; everything else stays the text it is."""
    if text in ("", "~", "null"):
        return None
    if text in ("true", "false"):
        return text == "true"
    if INTEGER.fullmatch(text):
        return int(text)
    if any(c.isdigit() for c in text) and DECIMAL.fullmatch(text) and text[-1] not in "+-eE":
        number = float(text)
        return number if abs(number) != float("inf") else text
    return text


def path_text(path: FieldPath) -> str:
    """`ingredients[2].amount` for ("ingredients", 2, "amount")."""
    text = ""
    for step in path:
        text += f"[{step}]" if isinstance(step, int) else f".{step}" if text else str(step)
    return text


def validate(model, document: Document):
    """The document's data as `model` (a pydantic model of `formcheck.strict.Strict` kind).

    Raises
    ------
    InputError
        one problem for each mistake, each with its place.
    """
    from pydantic import ValidationError

    try:
        return model.model_validate(document.data)
    except ValidationError as error:
        problems = [_problem(model, document, item) for item in error.errors(include_url=False)]
    raise InputError(_without_echoes(_without_misspelt(problems)))


def _without_misspelt(problems: list[Problem]) -> list[Problem]:
    """A misspelt key is both unknown and missing: told once, as unknown. In the order of the file."""
    misspelt = {(path_of(problem.field), problem.expected.split("'")[1]) for problem in problems
                if problem.found.startswith("the unknown key") and problem.expected.startswith("did you mean")}
    kept = [problem for problem in problems
            if not (problem.found.startswith("no '") and (problem.field, problem.found.split("'")[1]) in misspelt)]
    return sorted(kept, key=lambda problem: (problem.place.line or 0, problem.place.column or 0))


def path_of(field: str) -> str:
    """The field around a field: `ingredients[2]` for `ingredients[2].amount`."""
    return field.rpartition(".")[0]


def _without_echoes(problems: list[Problem]) -> list[Problem]:
    """A value tried against several shapes complains once for each; keep one to a place."""
    kept: dict[tuple[Place, str], Problem] = {}
    for problem in problems:
        kept.setdefault((problem.place, problem.field), problem)
    return list(kept.values())[:20]


def _problem(model, document: Document, item) -> Problem:
    path = _real_path(document.data, tuple(item["loc"]))
    context = item.get("ctx") or {}
    if item["type"] == "extra_forbidden":
        key = str(item["loc"][-1])
        return Problem(document.place(path), f"the unknown key {shown(key)}",
                       suggestion(key, keys_known_at(model, tuple(item["loc"][:-1]))), path_text(path))
    if item["type"] == "missing":
        name = str(item["loc"][-1])
        return Problem(document.place(path), f"no {name!r} here", f"a line `{name}: ...`", path_text(path))
    if item["type"] == "ours":
        return Problem(document.place(path), context["found"], context["expected"], path_text(path))
    return Problem(document.place(path), shown(item.get("input")), _plain_words(item), path_text(path))


def keys_known_at(model, loc: FieldPath) -> list[str]:
    """The keys that a model inside `model` knows; `loc` is pydantic's way to it, steps of alternatives and all."""
    known = [model]
    for step in loc:
        fields = [one.model_fields[step] for one in known if str(step) in one.model_fields]
        named = [one for one in known if one.__name__ == step]
        inside = [inner for field_ in fields for inner in _models_in(field_.annotation)]
        known = inside or named or known
    return list(dict.fromkeys(field_.alias or name for one in known for name, field_ in one.model_fields.items()))


def _models_in(annotation: Any) -> list:
    """Every model class that an annotation mentions."""
    if hasattr(annotation, "model_fields"):
        return [annotation]
    return [model for part in get_args(annotation) for model in _models_in(part)]


def _real_path(data: Any, loc: FieldPath) -> FieldPath:
    """pydantic's loc without the steps it adds for alternatives; ends at what the file really holds."""
    path: list[str | int] = []
    for step in loc:
        inside_list = isinstance(data, list) and isinstance(step, int) and 0 <= step < len(data)
        if inside_list or (isinstance(data, dict) and step in data):
            data = data[step]
            path.append(step)
    return tuple(path)


WORDS = {
    "string_type": "text",
    "int_type": "a whole number",
    "int_from_float": "a whole number",
    "int_parsing": "a whole number",
    "float_type": "a number",
    "float_parsing": "a number",
    "finite_number": "a finite number",
    "list_type": "a list (lines that begin with `- `)",
    "dict_type": "a mapping (`key: value` lines)",
    "model_type": "a mapping (`key: value` lines)",
    "bool_type": "true or false",
    "date_from_datetime_parsing": "a date such as 2026-12-01",
    "date_type": "a date such as 2026-12-01",
}


def _plain_words(item) -> str:
    message = item["msg"]
    return WORDS.get(item["type"], message.replace("Input should be ", "").replace("Value error, ", ""))
