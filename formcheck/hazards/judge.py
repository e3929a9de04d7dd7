"""The book put to one recipe: every rule's answer, told so that it can be followed and acted on."""

from __future__ import annotations

from formcheck.hazards.answer import Answer
from formcheck.hazards.cautions import CompiledCaution
from formcheck.hazards.compiled import CompiledBook, CompiledRule, answer_codes, limit_values
from formcheck.hazards.limits import CompiledLimit
from formcheck.hazards.meetings import CompiledMeeting
from formcheck.hazards.mixture import Bounds, MixtureFacts
from formcheck.hazards.rule import Caution, LimitOnSum, MustNotMeet, PhWindow, Rule, RuleSource
from formcheck.hazards.tell import Asked, grade_of, plain_answer
from formcheck.hazards.tell_company import told_caution, told_meeting
from formcheck.hazards.tell_limit import told_limit
from formcheck.hazards.tell_window import told_windows
from formcheck.hazards.verdict import NOT_APPLICABLE, NOT_IN_FORCE, WORDS

__all__ = ["Answer", "grade_of", "judge"]


def judge(compiled: CompiledBook, facts: MixtureFacts, *, recipe: int = 0) -> list[Answer]:
    """The answers of all rules to one recipe of a batch, in the order of the book.

    A rule about pH windows may answer several times, once for each ingredient outside of its window;
    every other rule answers once. The day is that of `compiled`.
    """
    one = facts.only(recipe)
    codes = answer_codes(compiled, one)[0]
    values = limit_values(compiled, one)
    answers: list[Answer] = []
    for q, (rule, how) in enumerate(zip(compiled.rules, compiled.compiled, strict=True)):
        asked = Asked(rule, int(codes[q]), compiled, one)
        if how is None or codes[q] in (NOT_APPLICABLE, NOT_IN_FORCE):
            answers.append(plain_answer(asked, _source(rule), WORDS[codes[q]].replace("_", " ")))
        else:
            answers += _told(asked, how, values.get(q, []))
    return answers


def _told(asked: Asked, how: CompiledRule, values: list[Bounds]) -> list[Answer]:
    if isinstance(how, CompiledLimit):
        return [told_limit(asked, how, values)]
    if isinstance(how, CompiledMeeting):
        return [told_meeting(asked, how)]
    if isinstance(how, CompiledCaution):
        return [told_caution(asked, how)]
    return told_windows(asked, how)


def _source(rule: Rule) -> RuleSource:
    """The source to show where none of the dated ones holds: the first."""
    if isinstance(rule, LimitOnSum):
        return rule.sources[rule.limit[0].source]
    if isinstance(rule, PhWindow):
        return rule.sources[rule.source or rule.window[0].source]
    assert isinstance(rule, (MustNotMeet, Caution))
    return rule.sources[rule.in_force.source]
