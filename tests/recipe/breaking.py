"""Recipe files broken at random, from a seed: wrong types, absurd numbers, nesting, aliases, bytes, cuts."""

from __future__ import annotations

import json
import random
import re
from collections.abc import Callable
from typing import Any

JUNK: list[Any] = [
    None, True, False, 0, -1, 1, -0.0, 1e308, -1e308, 10**40, 1e-320, "", " ", "x", "1 g", "-5 g", "1e300 kg",
    "nan g", "inf % w/w", "5 %", "200 % w/w", "to make up", "3 parts", "1 g/L", "0 mL", "٣ g", "½ kg", "5 µL",
    "null", "~", "2026-13-45", "../../../etc/passwd", "C:\\con", "a\u0000b", "\ufeff", "\u202egnirts",
    "💧" * 50, "=cmd()", "{{7*7}}", "%s%n", "é" * 300, "g" * 5000, [], {}, [[]], [[[[[[]]]]]],
    {"a": {"b": {"c": 1}}},
    [1, 2, 3], ["a"] * 30, {"material": "water"}, {"spectrum": "missing.csv"}, {"lab": [1, 2, 3]},
    ["water", "1 g"],
]
AMOUNTS = ["300 g", "5 % w/w", "20 % v/v", "10 parts", "3 g/L", "2 mL", "to make up", "0 g", "0 parts",
           "50 %", "100 %", "1e-12 g", "9e14 g", "1e-9 % w/w", "100 % v/v", "999 g/L", "1e12 parts",
           "1e-9 parts", "1e12 g/L", "0.1 uL"]
WORDS = [".nan", ".inf", "-.inf", "1e999", "-1", "0", "99999999999999999999999", "0x1F", "1_000", "15:3",
         "NO", "[", "{", "}", "*a", "&a b", "!!python/object:os.system x", "!!binary aGk=", "<<: x", "|", ">",
         "? x", "- - - x", "'", '"', "\t", "\u2028", "#", ": :", "@", "`", "%YAML 9.9", "---", "...", "\x07"]
NUMBER = re.compile(r"(?<![\w.])-?\d+(?:\.\d+)?")


def broken(text: str, seed: int) -> bytes:
    """The bytes of a recipe file after one to four random edits."""
    chance = random.Random(seed)
    if chance.random() < 0.45:
        try:
            return broken_values(text, chance)
        except ValueError:
            pass  # not a YAML recipe: broken as text below
    if chance.random() < 0.25:
        return chance.choice(WHOLE)(text, chance)
    for _ in range(chance.randint(1, 4)):
        text = chance.choice(EDITS)(text, chance)
    return text.encode("utf-8", "surrogatepass")


def broken_values(text: str, chance: random.Random) -> bytes:
    """Well-formed text whose values are wrong: some replaced by junk, moved, dropped or renamed."""
    from formcheck.documents import parse_yaml
    from formcheck.trouble import InputError

    try:
        data = parse_yaml(text, "sample").data
    except InputError:
        raise ValueError("not YAML") from None
    if not isinstance(data, dict):  # delimited text may pass for one YAML text
        raise ValueError("not a mapping")
    if chance.random() < 0.4 and isinstance(data.get("ingredients"), list):
        return _other_amounts(data, chance)
    for _ in range(chance.randint(1, 3)):
        holder, key = chance.choice(list(_slots(data)))
        action = chance.randrange(4)
        if action == 0 and isinstance(holder, dict):
            holder[str(key) + chance.choice("sx_")] = holder.pop(key)
        elif action == 1:
            del holder[key]
        elif action == 2:
            other, other_key = chance.choice(list(_slots(data)))
            holder[key] = json.loads(json.dumps(other[other_key]))
        else:
            holder[key] = chance.choice(JUNK)
    return json.dumps(data, ensure_ascii=chance.random() < 0.5, indent=1).encode("utf-8", "surrogatepass")


def _other_amounts(data: dict[str, Any], chance: random.Random) -> bytes:
    """A sound file of amounts that may not go together."""
    for line in data["ingredients"]:
        if chance.random() < 0.6:
            line["amount"] = chance.choice(AMOUNTS)
    if chance.random() < 0.5:
        data["batch"] = chance.choice(["1 kg", "2 L", "1e-9 g", "1e14 g", "1 uL"])
    return json.dumps(data, indent=1).encode()


def _slots(data: Any):
    """Every (container, key) inside the data."""
    items = data.items() if isinstance(data, dict) else enumerate(data) if isinstance(data, list) else ()
    for key, value in list(items):
        yield data, key
        yield from _slots(value)


def _spot(text: str, chance: random.Random) -> int:
    return chance.randrange(len(text) + 1)


def _lines(change: Callable[[list[str], random.Random], None]) -> Callable[[str, random.Random], str]:
    def edit(text: str, chance: random.Random) -> str:
        lines = text.split("\n")
        change(lines, chance)
        return "\n".join(lines)
    return edit


def _drop(lines: list[str], chance: random.Random) -> None:
    del lines[chance.randrange(len(lines))]


def _double(lines: list[str], chance: random.Random) -> None:
    lines.insert(chance.randrange(len(lines)), chance.choice(lines))


def _swap(lines: list[str], chance: random.Random) -> None:
    i, j = (chance.randrange(len(lines)) for _ in range(2))
    lines[i], lines[j] = lines[j], lines[i]


def _indent(lines: list[str], chance: random.Random) -> None:
    i = chance.randrange(len(lines))
    lines[i] = chance.choice([" ", "  ", "\t", "      "]) + lines[i].lstrip(" " * chance.randrange(3))


def _swap_key_and_value(lines: list[str], chance: random.Random) -> None:
    i = chance.randrange(len(lines))
    key, colon, value = lines[i].partition(": ")
    lines[i] = value + colon + key


def _number(text: str, chance: random.Random) -> str:
    found = list(NUMBER.finditer(text))
    if not found:
        return text
    at = chance.choice(found)
    return text[: at.start()] + chance.choice([*WORDS, "-3", "1e15", "1e14", "7", ""]) + text[at.end():]


def _insert(text: str, chance: random.Random) -> str:
    at = _spot(text, chance)
    return text[:at] + chance.choice(WORDS) + text[at:]


def _character(text: str, chance: random.Random) -> str:
    at = _spot(text, chance)
    character = chr(chance.choice([0, 7, 10, 34, 39, 58, 127, 133, 160, 0x2028, 0xFEFF, 0x1F4A7]))
    return text[:at] + character + text[at + 1:]


def _cut(text: str, chance: random.Random) -> str:
    return text[: _spot(text, chance)]


def _cut_out(text: str, chance: random.Random) -> str:
    start = _spot(text, chance)
    return text[:start] + text[start + chance.randrange(40):]


EDITS = [_lines(_drop), _lines(_double), _lines(_swap), _lines(_indent), _lines(_swap_key_and_value), _number,
         _number, _insert, _character, _cut, _cut_out]


def _bytes(text: str, chance: random.Random) -> bytes:
    raw = bytearray(text.encode())
    for _ in range(chance.randint(1, 20)):
        raw[chance.randrange(len(raw))] = chance.randrange(256)
    return bytes(raw)


def _alias_bomb(text: str, chance: random.Random) -> bytes:
    layers = ["a0: &a0 [x, x]"] + [f"a{n}: &a{n} [*a{n - 1}, *a{n - 1}, *a{n - 1}]" for n in range(1, 30)]
    return ("\n".join(layers) + "\n" + text).encode()


def _deep(text: str, chance: random.Random) -> bytes:
    n = chance.choice([30, 1000, 100_000])
    opening, closing = chance.choice([("[", "]"), ("{a: ", "}"), ("- ", "")])
    return (chance.choice(["note: ", text + "\nnote: "]) + opening * n + "1" + closing * n).encode()


def _long(text: str, chance: random.Random) -> bytes:
    n = chance.choice([1000, 100_000, 1_900_000])
    return chance.choice([
        text.replace(": ", ": " + "x" * n, 1), text.replace("g", " " * n + "g"), "k" * n + ": 1\n" + text,
        text + "\n" * n, text.replace("amount: ", "amount: 1" + "0" * n, 1), "#" + "y" * n + "\n" + text,
        text.replace("amount: ", "amount: 1 g" + " " * n + "x ", 1)]).encode()


def _many(text: str, chance: random.Random) -> bytes:
    n = chance.choice([150, 5000, 60_000])
    return (text + "\nlights:\n" + "  - D65\n" * n
            + chance.choice(["", "sold_in: [" + "EU, " * n + "US]"])).encode()


WHOLE: list[Callable[[str, random.Random], bytes]] = [
    _bytes, _bytes, _bytes, _alias_bomb, _deep, _long, _many,
    lambda text, chance: b"",
    lambda text, chance: chance.choice([b"\n", b"---\n", b"[]", b"{}", b"null", b"42", b"- 1", b"\xff\xfe",
                                        b"\x00" * 99]),
    lambda text, chance: chance.randbytes(chance.choice([10, 1000, 50_000])),
    lambda text, chance: text.encode(chance.choice(["utf-16", "utf-32", "utf-8-sig", "cp500"]), "replace"),
    lambda text, chance: (text + "\n---\n" + text).encode(),
    lambda text, chance: text.replace("\n", chance.choice(["\r", "\r\n", "\x85"])).encode(),
    lambda text, chance: text.replace(":", chance.choice(["=", " :", "：", ""])).encode(),
]
