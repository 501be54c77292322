"""The whole road from a folder of records to the sheets of a handbook."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from sheetgen.faults import Fault, FaultLog
from sheetgen.quantities import Registry, registry
from sheetgen.quantities.batch import Batch, material_batch, specimen_batch
from sheetgen.records import Folder, Imprint, Record, Source, read_folder
from sheetgen.sheet import Derivation, Row, Sheet
from sheetgen.standing.grading import check_thresholds
from sheetgen.standing.limits import Indicators
from sheetgen.uncertainty import propagate

SEED = 20_260_101
ROWS = 256  # materials evaluated side by side: enough to amortise the calls, little enough for the memory


class Handbook:
    """A folder of records with everything derived from it.

    `sheets` are in the order of their slugs; `remarks` stop nothing and are worth a look.
    """

    def __init__(self, folder: Folder, declared: Registry, sheets: Sequence[Sheet]):
        self.folder, self.registry, self.sheets = folder, declared, tuple(sheets)
        self.imprint: Imprint = folder.imprint
        self.sources: dict[str, Source] = folder.sources
        checked = [fault for sheet in self.sheets for fault in sheet.crosschecks]
        self.remarks: tuple[Fault, ...] = tuple(sorted({*folder.remarks, *checked}))

    @classmethod
    def load(cls, path: str | Path, draws: int = 0, seed: int = SEED) -> Handbook:
        """Read and derive a folder; raises FaultsError with every fault of every file in it.

        With `draws`, each number that carries an uncertainty also gets a 95 % coverage interval from that many
        draws at least, and the word on whether its first-order uncertainty is valid.
        """
        folder = read_folder(Path(path))
        declared = registry_of(folder.imprint)
        log = FaultLog()
        check_thresholds(folder.imprint, declared.assumptions, log)
        log.raise_if_any()
        sheets = list(derive(folder.records, folder.imprint, declared, draws, seed))
        log.entries += [fault for sheet in sheets for fault in sheet.crosschecks]
        log.raise_if_any()
        return cls(folder, declared, sheets)

    def __getitem__(self, slug: str) -> Sheet:
        """The sheet with a slug; raises KeyError where there is none."""
        for sheet in self.sheets:
            if sheet.record.slug == slug:
                return sheet
        raise KeyError(slug)


def registry_of(imprint: Imprint) -> Registry:
    """Every quantity of a handbook: ours, and those of the file that its imprint names, read anew each time."""
    if imprint.own_quantities is None:
        return registry()
    from sheetgen.quantities.own import registry_with_own

    return registry_with_own(imprint.own_quantities)


def derive(
    records: Sequence[Record], imprint: Imprint, declared: Registry, draws: int = 0, seed: int = SEED
) -> Iterator[Sheet]:
    """The sheets of some records, in their order."""
    road = _Road(imprint, declared, draws, seed)
    for start in range(0, len(records), ROWS):
        part = records[start : start + ROWS]
        sheets: dict[str, Sheet] = {}
        for dimension in (3, 2):
            sheets |= road.sheets([r for r in part if r.electrons.dimension == dimension], dimension)
        yield from (sheets[record.slug] for record in part)


@dataclass(frozen=True)
class _Road:
    """From records of one number of dimensions to their sheets."""

    imprint: Imprint
    declared: Registry
    draws: int
    seed: int

    def sheets(self, group: Sequence[Record], dimension: int) -> dict[str, Sheet]:
        if not group:
            return {}
        materials = self._rows(material_batch(group, self.imprint), "material", dimension)
        specimens: dict[str, list[Row]] = {record.slug: [] for record in group}
        if any(record.specimens for record in group):
            for row in self._rows(specimen_batch(group, self.imprint), "specimen", dimension):
                specimens[row.record.slug].append(row)
        return {row.record.slug: Sheet(row, specimens[row.record.slug], self.imprint.edition) for row in materials}

    def _rows(self, batch: Batch, scope: str, dimension: int) -> Iterable[Row]:
        derived = propagate(self.declared.plans[scope, dimension], batch)
        derivation = Derivation(derived, Indicators(derived), self.declared, self.imprint, self.draws, self.seed)
        return [Row(derivation, row, scope) for row in range(len(batch.records))]
