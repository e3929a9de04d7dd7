"""What went wrong with something the user gave, told so that it can be put right.

Every mistake a user can make ends as one `InputError`: a list of places, each with what was
found there and what would be right. The command line prints it; no traceback reaches the user.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from difflib import get_close_matches


@dataclass(frozen=True)
class Place:
    """A spot in a file, counted from 1; line and column are None where a file has no such thing."""

    file: str
    line: int | None = None
    column: int | None = None

    def __str__(self) -> str:
        parts = [self.file, *(str(n) for n in (self.line, self.column) if n is not None)]
        return ":".join(parts)


@dataclass(frozen=True)
class Problem:
    """One mistake: where, what was found, what would be right."""

    place: Place
    found: str
    expected: str
    field: str = ""  # path inside the file, such as ingredients[2].amount

    def __str__(self) -> str:
        where = f"{self.place}  {self.field}".rstrip()
        asked = "" if self.expected.startswith("did you mean") else "expected "
        return f"{where}\n  found {self.found}\n  {asked}{self.expected}"


class InputError(Exception):
    """The user's input cannot be used; `problems` says why, place by place."""

    def __init__(self, problems: Problem | Iterable[Problem]):
        self.problems: tuple[Problem, ...] = (
            (problems,) if isinstance(problems, Problem) else tuple(problems)
        )
        super().__init__("\n".join(str(problem) for problem in self.problems))


def trouble(file: str, found: str, expected: str, *, line: int | None = None,
            column: int | None = None, field: str = "") -> InputError:
    """An InputError of a single problem."""
    return InputError(Problem(Place(file, line, column), found, expected, field))


def suggestion(word: str, known: Sequence[str], *, most: int = 12) -> str:
    """`did you mean 'x'?`, or the known words where none is close."""
    close = get_close_matches(word.lower(), [name.lower() for name in known], n=1, cutoff=0.6)
    if close:
        right = next(name for name in known if name.lower() == close[0])
        return f"did you mean {right!r}?"
    listed = ", ".join(known[:most]) + (", ..." if len(known) > most else "")
    return f"one of: {listed}"


def shown(value: object, *, most: int = 60) -> str:
    """A value as it may stand in a message: short, on one line."""
    text = repr(value)
    return text if len(text) <= most else text[: most - 3] + "..."
