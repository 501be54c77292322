"""What is wrong, where it is, and how to mend it."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field


@dataclass(frozen=True, order=True)
class Place:
    """A point in a file that a person wrote; line and column count from 1, and 0 means the whole file."""

    file: str
    line: int = 0
    column: int = 0

    def __str__(self) -> str:
        return ":".join([self.file, *(str(number) for number in (self.line, self.column) if number)])


@dataclass(frozen=True, order=True)
class Fault:
    """One thing that a person should mend, or (severity "remark") should know."""

    place: Place
    message: str
    severity: str = "fault"

    def __str__(self) -> str:
        prefix = "" if self.severity == "fault" else f"{self.severity}: "
        return f"{self.place}: {prefix}{self.message}"


class FaultsError(Exception):
    """The records are at fault: every fault of the run, sorted by place, each once."""

    def __init__(self, faults: Iterable[Fault]):
        self.faults = tuple(sorted(set(faults)))
        super().__init__("\n".join(map(str, self.faults)))


class MachineError(Exception):
    """The machine is at fault (a full disk, a folder that may not be written): one line that says so."""


@dataclass
class FaultLog:
    """Collects faults and remarks, so that one run reports them all."""

    entries: list[Fault] = field(default_factory=list)

    def fault(self, place: Place, message: str) -> None:
        """Note something that must be mended before anything is published."""
        self.entries.append(Fault(place, message))

    def remark(self, place: Place, message: str) -> None:
        """Note something that a person should know and that stops nothing."""
        self.entries.append(Fault(place, message, "remark"))

    def __iter__(self) -> Iterator[Fault]:
        return iter(self.entries)

    @property
    def faults(self) -> list[Fault]:
        """The entries that stop a press."""
        return [entry for entry in self.entries if entry.severity == "fault"]

    @property
    def remarks(self) -> list[Fault]:
        """The entries that stop nothing, sorted by place."""
        return sorted(entry for entry in self.entries if entry.severity == "remark")

    def raise_if_any(self) -> None:
        """Raise FaultsError where at least one fault was noted."""
        if faults := self.faults:
            raise FaultsError(faults)


def did_you_mean(word: str, options: Iterable[str]) -> str:
    """A closing sentence that guesses the intended word, or an empty string when nothing is near."""
    by_lower = {option.lower(): option for option in options}
    near = difflib.get_close_matches(word.lower(), by_lower, n=1, cutoff=0.6)
    return f" Did you mean '{by_lower[near[0]]}'?" if near else ""
