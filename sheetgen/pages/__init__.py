"""The pages of the handbook: what each needs, and the Jinja environment that sets it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

__all__ = ["lay_out"]


def lay_out(
    handbook: Any, figures: Mapping[str, Sequence[Any]], *, paper: bool = False
) -> Iterator[tuple[str, bytes]]:
    """Yield (relative path, content) for every page, style sheet, script and font of a handbook's site.

    `figures` maps a slug to the figures of that material; with `paper`, sheets lead to their PDF. Raises FaultsError,
    naming template:line, where a template cannot be rendered.
    """
    from .layout import lay_out as lay_out_pages  # loads Jinja, which only a press needs

    yield from lay_out_pages(handbook, figures, paper=paper)
