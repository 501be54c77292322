"""Many materials (or specimens) side by side: SI arrays of their inputs, their uncertainties and their names."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import nan

import numpy as np

from sheetgen.quantities.inputs import INPUTS, Input
from sheetgen.quantities.structure import STRUCTURE_INPUTS, structure_arrays
from sheetgen.records import Imprint, Record, Specimen, Value


@dataclass(frozen=True)
class Batch:
    """Inputs of N rows.

    `values[name]` has shape (1, N, K) in SI, NaN where a row has no such entry (inputs from the structure have
    further axes behind); `uncertainties[name]` (N, K) is 0 where the input is exact; `ids[name][row][k]` is the
    input's id in the record, or None for what no record states.
    """

    records: tuple[Record, ...]
    specimens: tuple[Specimen | None, ...]
    values: dict[str, np.ndarray]
    uncertainties: dict[str, np.ndarray]
    ids: dict[str, list[list[str | None]]]

    @property
    def uncertain(self) -> list[tuple[str, int]]:
        """The (name, entry) pairs that carry an uncertainty in at least one row."""
        return [(name, k) for name, u in self.uncertainties.items() for k in range(u.shape[1]) if np.any(u[:, k] > 0)]


def material_batch(records: Sequence[Record], imprint: Imprint) -> Batch:
    """The inputs of whole materials."""
    fields = [field for field in INPUTS if field.scope == "material"]
    rows = [(record, imprint) for record in records]
    return _batch(tuple(records), (None,) * len(rows), fields, rows)


def specimen_batch(records: Sequence[Record], imprint: Imprint) -> Batch:
    """The inputs of all specimens of the records, each row with those of its material beside its own."""
    pairs = [(record, specimen) for record in records for specimen in record.specimens]
    owners = tuple(record for record, _ in pairs)
    specimens = tuple(specimen for _, specimen in pairs)
    whole = _batch(owners, specimens, [f for f in INPUTS if f.scope == "material"], [(r, imprint) for r in owners])
    own = [field for field in INPUTS if field.scope == "specimen"]
    part = _batch(owners, specimens, own, [(r, imprint, s) for r, s in pairs], structure=False)
    return Batch(
        owners,
        specimens,
        whole.values | part.values,
        whole.uncertainties | part.uncertainties,
        whole.ids | part.ids,
    )


def input_names() -> frozenset[str]:
    """Every name that a declaration may read without it being a quantity."""
    return frozenset(field.name for field in INPUTS) | frozenset(STRUCTURE_INPUTS)


def input_titles() -> dict[str, str]:
    """Name → what to call the input when it is missing."""
    return {field.name: field.title for field in INPUTS} | dict(STRUCTURE_INPUTS)


def _batch(records, specimens, fields: Sequence[Input], rows: Sequence[tuple], structure: bool = True) -> Batch:
    names = [{id(value): name for name, value in record.inputs.items()} for record in records]
    values, uncertainties, ids = {}, {}, {}
    for field in fields:
        picked = [list(field.pick(*row)) for row in rows]
        width = max((len(entries) for entries in picked), default=1) or 1
        padded = [entries + [None] * (width - len(entries)) for entries in picked]
        shape = (len(rows), width)
        values[field.name] = np.array([[_si(e) for e in r] for r in padded], dtype=float).reshape(1, *shape)
        uncertainties[field.name] = np.array([[_u(e) for e in r] for r in padded], dtype=float).reshape(shape)
        ids[field.name] = [[known.get(id(e)) for e in r] for known, r in zip(names, padded, strict=True)]
    if structure:
        values |= structure_arrays(records)
    return Batch(records, specimens, values, uncertainties, ids)


def _si(entry: Value | float | None) -> float:
    if entry is None:
        return nan
    return entry.si if isinstance(entry, Value) else float(entry)


def _u(entry: Value | float | None) -> float:
    return (entry.si_uncertainty or 0.0) if isinstance(entry, Value) else 0.0
