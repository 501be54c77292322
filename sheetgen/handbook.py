"""The whole road from a folder of records to the sheets of a handbook."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from pathlib import Path

from sheetgen.faults import Fault, FaultLog
from sheetgen.quantities import Registry, registry
from sheetgen.quantities.batch import Batch, material_batch, specimen_batch
from sheetgen.records import Folder, Imprint, Record, Source, read_folder
from sheetgen.sheet import Derivation, Row, Sheet
from sheetgen.standing.grading import check_thresholds
from sheetgen.standing.limits import Indicators
from sheetgen.uncertainty import propagate

ROWS = 256  # materials evaluated side by side: enough to amortise the calls, little enough for the memory


class Handbook:
    """A folder of records with everything derived from it.

    `sheets` are in the order of their slugs; `remarks` stop nothing and are worth a look.
    """

    def __init__(self, folder: Folder, declared: Registry, sheets: Sequence[Sheet]):
        self.folder, self.registry, self.sheets = folder, declared, tuple(sheets)
        self.imprint: Imprint = folder.imprint
        self.sources: dict[str, Source] = folder.sources
        self.remarks: tuple[Fault, ...] = tuple(folder.remarks)

    @classmethod
    def load(cls, path: str | Path) -> Handbook:
        """Read and derive a folder; raises FaultsError with every fault of every file in it."""
        folder = read_folder(Path(path))
        declared = registry()
        log = FaultLog()
        check_thresholds(folder.imprint, declared.assumptions, log)
        log.raise_if_any()
        return cls(folder, declared, list(derive(folder.records, folder.imprint, declared)))

    def __getitem__(self, slug: str) -> Sheet:
        """The sheet with a slug; raises KeyError where there is none."""
        for sheet in self.sheets:
            if sheet.record.slug == slug:
                return sheet
        raise KeyError(slug)


def derive(records: Sequence[Record], imprint: Imprint, declared: Registry) -> Iterator[Sheet]:
    """The sheets of some records, in their order."""
    for start in range(0, len(records), ROWS):
        part = records[start : start + ROWS]
        sheets: dict[str, Sheet] = {}
        for dimension in (3, 2):
            group = [record for record in part if record.electrons.dimension == dimension]
            sheets |= _derive_group(group, dimension, imprint, declared)
        yield from (sheets[record.slug] for record in part)


def _derive_group(group: Sequence[Record], dimension: int, imprint: Imprint, declared: Registry) -> dict[str, Sheet]:
    if not group:
        return {}
    materials = _rows(material_batch(group, imprint), "material", dimension, imprint, declared)
    specimens: dict[str, list[Row]] = {record.slug: [] for record in group}
    if any(record.specimens for record in group):
        for row in _rows(specimen_batch(group, imprint), "specimen", dimension, imprint, declared):
            specimens[row.record.slug].append(row)
    return {row.record.slug: Sheet(row, specimens[row.record.slug], imprint.edition) for row in materials}


def _rows(batch: Batch, scope: str, dimension: int, imprint: Imprint, declared: Registry) -> Iterable[Row]:
    derived = propagate(declared.plans[scope, dimension], batch)
    derivation = Derivation(derived, Indicators(derived), declared, imprint)
    return [Row(derivation, row, scope) for row in range(len(batch.records))]
