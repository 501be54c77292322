"""The paper edition: each sheet and the whole handbook as PDF, set by WeasyPrint (the extra `pdf`)."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Any

__all__ = ["paper_edition", "require"]


def require() -> None:
    """Raise MachineError, with what to install, where the paper edition cannot be made on this machine."""
    from sheetgen.paper.typesetting import require as required

    required()


def paper_edition(
    handbook: Any,
    figures: Mapping[str, Sequence[Any]],
    progress: Callable[[str, int, int], None] = lambda step, done, total: None,
) -> Iterator[tuple[str, bytes]]:
    """Yield (path below the site, PDF) for each sheet, and for the whole handbook.

    The same handbook gives the same bytes. Raises MachineError where a library is missing.
    """
    from sheetgen.paper.edition import paper_edition as edition  # loads WeasyPrint, which only paper needs

    yield from edition(handbook, figures, progress)
