"""The answers of pairs that must not meet, and of cautions."""

from __future__ import annotations

import numpy as np

from formcheck.hazards.answer import Answer
from formcheck.hazards.cautions import CompiledCaution, ingredients_called
from formcheck.hazards.meetings import CompiledMeeting, conditions, points_to_it
from formcheck.hazards.missing import RECIPE, Missing, data_missing
from formcheck.hazards.rule import Company
from formcheck.hazards.selector import Selector
from formcheck.hazards.sentences import caution_sentence, meeting_sentence, number
from formcheck.hazards.tell import Asked, plain_answer
from formcheck.hazards.verdict import CANNOT_TELL
from formcheck.hazards.water import water_in


def told_meeting(asked: Asked, how: CompiledMeeting) -> Answer:
    rule, present = how.rule, asked.facts.present[0]
    first, second = _there(how.first, present), _there(how.second, present)
    said = meeting_sentence(
        asked.word, first=asked.names(first), second=asked.names(second), first_name=rule.first.name,
        second_name=rule.second.name, consequence=rule.consequence, when=_when(rule.when))
    missing: list[Missing] = []
    if asked.code == CANNOT_TELL:
        missing += asked.scope_missing()
        missing += _open_data(asked, rule.first.where, how.first, first)
        missing += _open_data(asked, rule.second.where, how.second, second)
        missing += _conditions_missing(asked, rule.when)
    told = asked.word != "no_flag"
    ingredients = tuple(dict.fromkeys([*first, *second])) if told else ()
    return plain_answer(
        asked, rule.sources[how.force.source], said, in_force_from=how.force.starts, ingredients=ingredients,
        faint=asked.code == CANNOT_TELL and not points_to_it(how, asked.facts)[0],
        missing=tuple(dict.fromkeys(missing)), place=asked.place(ingredients))


def told_caution(asked: Asked, how: CompiledCaution) -> Answer:
    surely, possibly = (one[0] for one in ingredients_called(how, asked.facts))
    which = [int(i) for i in np.flatnonzero(surely if surely.any() else possibly)]
    said = caution_sentence(asked.word, names=asked.names(which), title=how.rule.title)
    missing: list[Missing] = []
    if asked.code == CANNOT_TELL:
        missing += asked.scope_missing()
        missing += _open_data(asked, how.rule.where, how.which, which)
        missing += [Missing(i, "the amount") for i in which if np.isnan(asked.facts.mass_fraction[0, i])
                    and how.rule.at_least_percent]
    told = asked.word != "no_flag"
    return plain_answer(
        asked, how.rule.sources[how.force.source], said, in_force_from=how.force.starts,
        ingredients=tuple(which) if told else (), faint=asked.code == CANNOT_TELL and not surely.any(),
        missing=tuple(dict.fromkeys(missing)), place=asked.place(which) if told else "")


def _there(party: np.ndarray, present: np.ndarray) -> list[int]:
    """The ingredients surely of the party, or those that may be when none surely is."""
    surely = present & party[0]
    return [int(i) for i in np.flatnonzero(surely if surely.any() else present & party[1])]


def _open_data(asked: Asked, selector: Selector, which: np.ndarray, ingredients: list[int]) -> list[Missing]:
    """What would tell whether the ingredients agree, for those that only may."""
    return [Missing(i, datum) for i in ingredients if not which[0, i]
            for datum in data_missing(asked.compiled.matcher, selector, asked.facts.materials[i],
                                      content=False)]


def _conditions_missing(asked: Asked, when: Company) -> list[Missing]:
    water = asked.compiled.water_in(asked.facts)
    surely, possibly = (bool(one[0]) for one in conditions(when, asked.facts, water))
    if surely or not possibly:
        return []
    wet = water_in(asked.facts, water)[0][0]
    found = [] if wet else [Missing(RECIPE, "whether there is water in the mixture")]
    hangs_on_ph = when.ph_below is not None or when.ph_above is not None
    if hangs_on_ph and (wet or np.isnan(asked.facts.ph[0][0])):
        found.append(Missing(RECIPE, "the pH of the mixture"))
    return found


def _when(when: Company) -> str:
    parts = [" in water"] if when.in_water else []
    if when.ph_below is not None:
        parts.append(f" below pH {number(when.ph_below)}")
    if when.ph_above is not None:
        parts.append(f" above pH {number(when.ph_above)}")
    return "".join(parts)
