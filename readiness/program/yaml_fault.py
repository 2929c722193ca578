"""Where a YAML file stopped being readable, and the lines around that place."""

from dataclasses import dataclass

from readiness.program.yaml_traps import Written


@dataclass(frozen=True)
class Fault:
    """Where the library stopped and where the construct began (line and column from 0), and why."""

    lines: list[str]
    line: int
    column: int
    begun: tuple[int, int] | None
    context: str
    problem: str
    last: Written | None

    def text(self, line: int | None = None) -> str:
        """Return the line of the fault, or another one."""
        number = self.line if line is None else line
        return self.lines[number] if 0 <= number < len(self.lines) else ""

    @property
    def character(self) -> str:
        """Return the character at the fault, or nothing at the end of a line."""
        return self.text()[self.column : self.column + 1]

    @property
    def before(self) -> str:
        """Return what stands in the line before the fault."""
        return self.text()[: self.column]

    @property
    def rest(self) -> str:
        """Return what stands in the line from the fault on."""
        return self.text()[self.column :]

    @property
    def at_end(self) -> bool:
        """Return whether nothing but comments follows."""
        later = [self.rest, *self.lines[self.line + 1 :]]
        return all(not line.strip() or line.lstrip().startswith("#") for line in later)

    def last_opening(self) -> tuple[int, int] | None:
        """Return where the last bracket or brace before the fault opens."""
        for line in range(min(self.line, len(self.lines) - 1), -1, -1):
            text = self.before if line == self.line else self.text(line)
            if (column := max(text.rfind("["), text.rfind("{"))) >= 0:
                return line, column
        return None

    def indent(self, line: int | None = None) -> int:
        """Return how many spaces stand before the text of a line."""
        text = self.text(line)
        return len(text) - len(text.lstrip(" "))

    def line_above(self) -> int | None:
        """Return the last line before the fault that is not blank."""
        return next((line for line in range(self.line - 1, -1, -1) if self.text(line).strip()), None)

    def says(self, *words: str) -> bool:
        """Return whether the library's words hold one of these."""
        return any(word in self.problem or word in self.context for word in words)
