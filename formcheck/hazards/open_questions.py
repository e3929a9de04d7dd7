"""What could not be told, turned round: each datum that is missing, with the rules it would settle."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from formcheck.hazards.answer import Answer
from formcheck.hazards.missing import RECIPE, Missing

GRAVEST_FIRST = ("stop", "hold", "care", "note", "unknown")


@dataclass(frozen=True)
class OpenQuestion:
    """A missing datum, in words, the ids of the rules that wait for it, and the gravest of their grades."""

    datum: str
    ingredient: int | None  # None for a datum of the recipe itself
    rules: tuple[str, ...]
    grade: str


def open_questions(answers: Sequence[Answer], names: tuple[str, ...]) -> list[OpenQuestion]:
    """The data that would settle most, first the gravest, then those that settle the most rules."""
    waiting: dict[Missing, list[Answer]] = {}
    for answer in answers:
        for one in answer.missing:
            waiting.setdefault(one, []).append(answer)
    questions = [OpenQuestion(one.said(names), None if one.ingredient == RECIPE else one.ingredient,
                              tuple(dict.fromkeys(answer.rule.id for answer in waits)), _gravest(waits))
                 for one, waits in waiting.items()]
    return sorted(questions, key=lambda q: (GRAVEST_FIRST.index(q.grade), -len(q.rules), q.datum))


def _gravest(answers: Sequence[Answer]) -> str:
    return min((answer.grade or "unknown" for answer in answers), key=GRAVEST_FIRST.index)
