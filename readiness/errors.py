"""What can go wrong, in the words of the person who has to mend it."""

from dataclasses import dataclass


@dataclass(frozen=True, order=True)
class Place:
    """Where something stands in a program folder; line and column count from 1, 0 means the whole file."""

    file: str
    line: int = 0
    column: int = 0

    def __str__(self) -> str:
        """Return file:line:column, as editors understand it."""
        if self.line == 0:
            return self.file
        return f"{self.file}:{self.line}:{self.column}"


@dataclass(frozen=True, order=True)
class Problem:
    """One thing that must be mended before the program can be read."""

    place: Place
    message: str
    kind: str

    def __str__(self) -> str:
        """Return the problem on one line."""
        return f"{self.place}: {self.message} [{self.kind}]"


class ProgramProblems(Exception):
    """The program folder cannot be used as it is; carries every problem found."""

    def __init__(self, problems: list[Problem] | tuple[Problem, ...]) -> None:
        """Keep the problems in the order of their places."""
        self.problems = tuple(sorted(set(problems)))
        super().__init__(f"problems in the program folder: {len(self.problems)}")


class UsageError(Exception):
    """The command cannot be carried out as asked; the text says why and what to do next."""


class OutsideValidity(Exception):
    """A calculation was asked for something outside the range in which it holds; the text says which."""


class CatalogueError(Exception):
    """Our own fields, values, rules or documents do not fit together; found when they are loaded."""
