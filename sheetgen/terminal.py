"""How the commands look on a terminal: help that starts with an example, and one line of progress."""

from __future__ import annotations

import sys
from typing import Any

import click

BAR = 24


class WrongWordError(click.UsageError):
    """A word of the command line that means nothing here; the message says how to mend it."""


def with_example(error: click.UsageError) -> str:
    """The message, closed by an example of the command where it does not itself say how to mend it."""
    message = error.format_message()
    examples = getattr(error.ctx.command if error.ctx else None, "examples", [])
    return message if isinstance(error, WrongWordError) or not examples else f"{message} As in: {examples[0]}"


class Argument(click.Argument):
    """A word of the command line that says in the help what it stands for."""

    def __init__(self, *declarations: Any, said: str, **settings: Any):
        super().__init__(*declarations, **settings)
        self.said = said

    def get_help_record(self, ctx: click.Context) -> tuple[str, str]:
        """Name and meaning, as an option has them."""
        return self.human_readable_name.upper(), self.said


class _ExamplesFirst(click.Command):
    """Help in our order: examples as they are typed, one sentence, then every word with its meaning."""

    def __init__(self, *positional: Any, examples: list[str], **settings: Any):
        super().__init__(*positional, **settings)
        self.examples = examples

    def format_help(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the help text."""
        for example in self.examples:
            formatter.write(f"$ {example}\n")
        formatter.write_paragraph()
        formatter.write_text(self.help or "")
        formatter.write_paragraph()
        formatter.write_dl(self.rows(ctx), col_max=20)

    def get_help_option(self, ctx: click.Context) -> click.Option | None:
        """The option that shows the help, in our words."""
        option = super().get_help_option(ctx)
        if option is not None:
            option.help = "Show this text."
        return option

    def rows(self, ctx: click.Context) -> list[tuple[str, str]]:
        """Pairs of a word of the command line and its meaning."""
        return [record for parameter in self.get_params(ctx) if (record := parameter.get_help_record(ctx))]


class Command(_ExamplesFirst):
    """One command."""


class Commands(_ExamplesFirst, click.Group):
    """The group of all commands; its help says what each is for."""

    def rows(self, ctx: click.Context) -> list[tuple[str, str]]:
        """The commands, then the options."""
        named = ((name, self.get_command(ctx, name)) for name in self.list_commands(ctx))
        purposes = [(name, command.get_short_help_str(120)) for name, command in named if command]
        return purposes + super().rows(ctx)

    def resolve_command(self, ctx: click.Context, args: list[str]) -> Any:
        """The command that the first word names; a misspelt one gets a guess."""
        from sheetgen.faults import did_you_mean

        if self.get_command(ctx, args[0]) is None and not args[0].startswith("-"):
            known = self.list_commands(ctx)
            guess = did_you_mean(args[0], known)
            raise WrongWordError(f"There is no command '{args[0]}'; expected {', '.join(known)}.{guess}")
        return super().resolve_command(ctx, args)


class ProgressLine:
    """One line on stderr that a long command keeps up to date; nothing at all where stderr is no terminal."""

    def __init__(self) -> None:
        self.shown = sys.stderr.isatty()
        self.last = ""

    def __enter__(self) -> ProgressLine:
        return self

    def __exit__(self, *_reason: object) -> None:
        self.clear()

    def clear(self) -> None:
        """Take the line away, to make room for one that stays."""
        self._write("")

    def __call__(self, step: str, done: int, total: int) -> None:
        """Show a step, how much of it is done, and of how much (0: not known)."""
        if not self.shown:
            return
        count = f" {done} of {total}" if total else f" {done}" if done else ""
        filled = BAR * done // total if total else 0
        bar = f"▕{'█' * filled}{' ' * (BAR - filled)}▏" if total else ""
        self._write(f"{bar} {step}{count}".strip())

    def _write(self, line: str) -> None:
        if self.shown and line != self.last:
            sys.stderr.write(f"\r{line:<{len(self.last)}}" if line else f"\r{' ' * len(self.last)}\r")
            sys.stderr.flush()
            self.last = line
