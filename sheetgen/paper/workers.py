"""Setting documents in several processes: each loads fonts and style once."""

from __future__ import annotations

import multiprocessing
import os
from collections.abc import Iterator, Sequence
from concurrent.futures import Future, ProcessPoolExecutor
from contextlib import contextmanager

from sheetgen.paper.typesetting import Manuscript, Printed, Typesetter

# More would set no faster per core and take a hundred megabytes each.
MOST = 4
_setter: Typesetter | None = None


@contextmanager
def pool(style: str, fonts: str, documents: int) -> Iterator[ProcessPoolExecutor]:
    """Processes that set documents, as many as there are processors and documents; they end with the block."""
    workers = max(1, min(_processors(), MOST, documents))
    # Started afresh and not forked: safe beside threads, and alike on every system.
    context = multiprocessing.get_context("spawn")
    executor = ProcessPoolExecutor(workers, mp_context=context, initializer=_begin, initargs=(style, fonts))
    try:
        yield executor
    finally:
        executor.shutdown(cancel_futures=True)


def submitted(executor: ProcessPoolExecutor, manuscripts: Sequence[Manuscript]) -> list[Future[Printed]]:
    """The documents, handed to the processes; results in the same order."""
    return [executor.submit(_set, manuscript) for manuscript in manuscripts]


def _processors() -> int:
    affinity = getattr(os, "sched_getaffinity", None)
    return len(affinity(0)) if affinity else os.cpu_count() or 1


def _begin(style: str, fonts: str) -> None:
    global _setter
    _setter = Typesetter(style, fonts)


def _set(manuscript: Manuscript) -> Printed:
    assert _setter is not None  # the initializer of the process ran
    return _setter.set(manuscript)
