"""What the answers of all kinds of rules share: grade, overdue, what is missing, where it stands."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

from formcheck.hazards.answer import Answer
from formcheck.hazards.compiled import CompiledBook
from formcheck.hazards.missing import RECIPE, Missing
from formcheck.hazards.mixture import MixtureFacts
from formcheck.hazards.rule import Grade, Rule, RuleSource
from formcheck.hazards.scope import not_stated, speaks_of
from formcheck.hazards.verdict import APPLIES, CANNOT_TELL, EXCEEDS, WORDS


@dataclass(frozen=True)
class Asked:
    """A rule put to one recipe (`facts` of one), and the code it answered with."""

    rule: Rule
    code: int
    compiled: CompiledBook
    facts: MixtureFacts

    @property
    def word(self) -> str:
        return WORDS[self.code]

    @cached_property
    def surely_in_scope(self) -> bool:
        return speaks_of(self.rule, self.facts.scopes[0], self.compiled.book.words)[0]

    def scope_missing(self) -> list[Missing]:
        """What the recipe does not state of its use or market, where the rule hangs on it."""
        stated = not_stated(self.rule, self.facts.scopes[0], self.compiled.book.words)
        return [Missing(RECIPE, what) for what in stated]

    def names(self, ingredients: Iterable[int]) -> list[str]:
        return [self.facts.names[i] for i in ingredients]

    def place(self, ingredients: Iterable[int]) -> str:
        """The place of the first of the ingredients that has one."""
        return next((self.facts.places[i] for i in ingredients if self.facts.places[i]), "")

    def would_settle(self, missing: Iterable[Missing]) -> tuple[str, ...]:
        return tuple(dict.fromkeys(one.said(self.facts.names) for one in missing))


def grade_of(rule: Rule, code: int) -> Grade | None:
    """The grade a rule gives to an answer; None where there is nothing to grade."""
    return {EXCEEDS: rule.grade.exceeds, APPLIES: rule.grade.applies,
            CANNOT_TELL: rule.grade.cannot_tell}.get(code)


def plain_answer(asked: Asked, source: RuleSource, said: str, **more) -> Answer:
    """An Answer with what follows from the rule and the code filled in."""
    missing = more.get("missing", ())
    return Answer(rule=asked.rule, answer=asked.word, grade=grade_of(asked.rule, asked.code), said=said,
                  source=source, overdue=asked.rule.review_by < asked.compiled.as_of,
                  would_settle=asked.would_settle(missing), **more)
