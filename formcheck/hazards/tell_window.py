"""The answers of pH windows: one for each ingredient outside, one for all that nobody can tell of."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from formcheck.hazards.answer import Answer
from formcheck.hazards.missing import RECIPE, Missing, data_missing
from formcheck.hazards.mixture import filled
from formcheck.hazards.rule import PhWindow, RuleSource
from formcheck.hazards.sentences import listed, window_sentence
from formcheck.hazards.tell import Asked, plain_answer
from formcheck.hazards.verdict import CANNOT_TELL, EXCEEDS
from formcheck.hazards.water import water_in
from formcheck.hazards.windows import CompiledWindow, Stood, outside, windows_untold


def told_windows(asked: Asked, how: CompiledWindow) -> list[Answer]:
    if asked.code not in (EXCEEDS, CANNOT_TELL):
        return [_quiet(asked, how)]
    water = asked.compiled.water_in(asked.facts)
    surely, possibly = (one[0] for one in outside(how, asked.facts, water))
    answers = [_beyond(asked, one, sure=bool(sure))
               for one, sure, may in zip(how.stood, surely, possibly, strict=True) if may]
    if windows_untold(how, asked.facts, water)[0]:
        answers.append(_untold(asked, how))
    return answers


def _beyond(asked: Asked, stood: Stood, *, sure: bool) -> Answer:
    """One ingredient whose window the pH leaves, or may leave."""
    sure = sure and asked.surely_in_scope
    asked = replace(asked, code=EXCEEDS if sure else CANNOT_TELL)
    ph = _ph(asked)
    name = _name(asked, stood)
    said = window_sentence(asked.word, name=name, ph=ph, window=(stood.low, stood.high), below=stood.below,
                           above=stood.above)
    finite = [None if np.isinf(value) else value for value in ph]
    return plain_answer(
        asked, stood.source, said, value_low=finite[0], value_high=finite[1], unit="pH",
        limit=_nearer_end(stood, ph), ingredients=(stood.ingredient,), place=asked.place([stood.ingredient]),
        missing=() if sure else tuple(_missing(asked, stood)), faint=not sure and not stood.surely)


def _name(asked: Asked, stood: Stood) -> str:
    assert isinstance(asked.rule, PhWindow)
    name = asked.facts.names[stood.ingredient]
    return asked.rule.whose or (f"{name} (its part {stood.of})" if stood.of else name)


def _missing(asked: Asked, stood: Stood) -> list[Missing]:
    found = asked.scope_missing()
    assert isinstance(asked.rule, PhWindow)
    if not stood.surely:
        found += [Missing(stood.ingredient, datum) for datum in data_missing(
            asked.compiled.matcher, asked.rule.where, asked.facts.materials[stood.ingredient],
            content=False)]
    if not water_in(asked.facts, asked.compiled.water_in(asked.facts))[0][0]:
        found.append(Missing(RECIPE, "whether there is water in the mixture"))
    if _ph(asked) == (-np.inf, np.inf):
        found.append(Missing(RECIPE, "the pH of the mixture"))
    elif not found:
        found.append(Missing(RECIPE, "the pH of the mixture, more closely"))
    return found


def _untold(asked: Asked, how: CompiledWindow) -> Answer:
    """The ingredients whose records tell no window."""
    asked = replace(asked, code=CANNOT_TELL)
    which = tuple(i for i in how.without if asked.facts.present[0, i])
    said = f"no pH window is on record for {listed(asked.names(which))}"
    return plain_answer(asked, _source(asked, how), said, ingredients=which, place=asked.place(which),
                        faint=True, missing=tuple(Missing(i, "the pH window") for i in which))


def _quiet(asked: Asked, how: CompiledWindow) -> Answer:
    there = [one for one in how.stood if asked.facts.present[0, one.ingredient]]
    names = listed([asked.facts.names[one.ingredient] for one in there])
    inside = asked.word == "within"
    said = f"the pH is inside of the windows of {names}" if inside else "nothing found outside of a window"
    return plain_answer(asked, _source(asked, how), said,
                        ingredients=tuple(dict.fromkeys(one.ingredient for one in there)))


def _source(asked: Asked, how: CompiledWindow) -> RuleSource:
    if how.rule.source:
        return asked.rule.sources[how.rule.source]
    return how.stood[0].source if how.stood else next(iter(asked.rule.sources.values()))


def _ph(asked: Asked) -> tuple[float, float]:
    low, high = filled(asked.facts.ph, 1, low=-np.inf, high=np.inf)
    return float(low[0]), float(high[0])


def _nearer_end(stood: Stood, ph: tuple[float, float]) -> float | None:
    """The end of the window that the pH is, or may be, beyond."""
    end = stood.low if ph[0] < stood.low and np.isfinite(stood.low) else stood.high
    return end if np.isfinite(end) else None
