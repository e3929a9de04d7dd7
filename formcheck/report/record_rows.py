"""Any record as rows of label and text, each datum with its source: what is on it is shown, known or new.

Walks the fields of a pydantic model, so a field added to a material or a rule is shown without a change here.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from datetime import date
from typing import Any, Literal, get_origin

from pydantic import BaseModel

from formcheck.report.numbers import exact, interval, with_sd
from formcheck.report.words import one_line, spelled, unit_text, with_unit

Row = tuple[int, str, str]  # depth, label, text
Cite = Callable[[str], str]  # key of a source -> the words of the citation

# Endings of field names, and the units they stand for.
UNIT_ENDINGS = {
    "_g_cm3": "g/cm3", "_g_mol": "g/mol", "_g_100g": "g/100 g", "_l_mol_cm": "L/(mol cm)", "_g_l": "g/L",
    "_g_ml": "g/mL", "_nm": "nm", "_um": "um", "_ev": "eV", "_cm": "cm", "_c": "degC", "_percent": "%",
    "mg_kg": "mg/kg",
}


def record_rows(record: BaseModel, cite: Cite, *, skip: frozenset[str] = frozenset(),
                depth: int = 0) -> Iterator[Row]:
    """Rows of every field that holds something; nested records hang one step deeper."""
    for name, value in told(record).items():
        if name not in skip and name != "source":
            yield from _rows(name, value, cite, depth)


def told(record: BaseModel) -> dict[str, Any]:
    """Fields that say something: not empty, nor a nought or an empty list that nobody wrote."""
    stated = record.model_fields_set
    return {name: spelled(value) if _is_word(record, name) else value for name, value in record
            if value is not None and value != "" and (value or name in stated)}


def _rows(name: str, value: Any, cite: Cite, depth: int) -> Iterator[Row]:
    label, unit = label_and_unit(name)
    if isinstance(value, BaseModel):
        yield from _record(label, unit, value, cite, depth)
    elif isinstance(value, Mapping):
        yield depth, label, "" if value else "none"
        for key, one in value.items():
            yield from _named(key, unit, one, cite, depth + 1)
    elif isinstance(value, list | tuple) and any(isinstance(one, BaseModel) for one in value):
        yield depth, label, ""
        for place, one in enumerate(value, 1):
            yield from _record(_name_of(one) or str(place), unit, one, cite, depth + 1)
    else:
        yield depth, label, with_unit(plain_text(value), unit)


def _named(key: str, unit: str, value: Any, cite: Cite, depth: int) -> Iterator[Row]:
    if isinstance(value, BaseModel):
        yield from _record(one_line(key), unit, value, cite, depth)
    else:
        yield depth, one_line(key), with_unit(plain_text(value), unit)


def _record(label: str, unit: str, record: BaseModel, cite: Cite, depth: int) -> Iterator[Row]:
    """A record within a record: on one line where it holds no further ones."""
    if any(_is_deep(value) for _, value in record):
        name = _name_of(record)
        yield depth, label, _cited("" if name == label else name, record, cite)
        yield from record_rows(record, cite, skip=frozenset({"name"}), depth=depth + 1)
    else:
        yield depth, label, _cited(leaf_text(record, unit), record, cite)


def leaf_text(record: BaseModel, unit: str) -> str:
    """A flat record in words: a value with its spread, or its fields one after the other."""
    fields = {key: value for key, value in told(record).items() if key not in ("source", "name", "material")}
    note = fields.pop("note", "")
    if "value" in fields and isinstance(fields["value"], int | float):
        text = with_unit(with_sd(fields.pop("value"), fields.pop("sd", None), digits=6), unit)
        bounds = interval(fields.pop("low", None), fields.pop("high", None))
        text = f"{text} ({bounds})" if bounds else text
    elif "value" in fields:
        text = one_line(fields.pop("value"))
    else:
        text = ""
    rest = ", ".join(_field_text(key, value) for key, value in fields.items())
    return "; ".join(part for part in (", ".join(x for x in (text, rest) if x), one_line(note)) if part)


FIELD_WORDS = {
    "ci generic name": "Colour Index name", "ci constitution number": "Colour Index number", "cas": "CAS",
    "k and s": "K and S", "ph window": "pH window", "pka": "pKa", "acid base": "acid and base",
    "solubility water": "solubility in water", "ci name": "Colour Index name", "voc": "VOC",
    "lambda max": "λmax", "epsilon": "ε", "epsilon relative sd": "relative sd of ε",
    "half height": "half heights",
}


def label_and_unit(name: str) -> tuple[str, str]:
    """`density_g_cm3` is `density` in `g/cm³`."""
    for ending, unit in UNIT_ENDINGS.items():
        if name.endswith(ending) and name != ending:
            words = spelled(name.removesuffix(ending))
            return FIELD_WORDS.get(words, words), unit_text(unit)
    if name in UNIT_ENDINGS:
        return "assay", unit_text(UNIT_ENDINGS[name])
    return FIELD_WORDS.get(spelled(name), spelled(name)), ""


def plain_text(value: Any) -> str:
    """A value without a record of its own, in words."""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float):
        return exact(value)
    if isinstance(value, date):
        return value.isoformat()
    if isinstance(value, list | tuple):
        return ", ".join(plain_text(one) for one in value) or "none"
    return one_line(value)


def _field_text(key: str, value: Any) -> str:
    label, unit = label_and_unit(key)
    return f"{label} {with_unit(plain_text(value), unit)}"


def _cited(text: str, record: BaseModel, cite: Cite) -> str:
    key = getattr(record, "source", "")
    source = cite(key) if isinstance(key, str) and key else ""
    return " — ".join(part for part in (text, source) if part)


def _name_of(record: Any) -> str:
    return one_line(getattr(record, "name", "") or getattr(record, "material", ""))


def _is_word(record: BaseModel, name: str) -> bool:
    """Whether a field holds one of a few fixed words: these are spelled out, ids and names are not."""
    return get_origin(type(record).model_fields[name].annotation) is Literal


def _is_deep(value: Any) -> bool:
    if isinstance(value, BaseModel):
        return True
    if isinstance(value, Mapping):
        return any(map(_is_deep, value.values()))
    return isinstance(value, list | tuple) and any(map(_is_deep, value))
