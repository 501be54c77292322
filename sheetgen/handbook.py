"""The whole road from a folder of records to the sheets of a handbook."""

from __future__ import annotations

import datetime
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from pathlib import Path
from types import MappingProxyType
from typing import Any

import numpy as np

from sheetgen.faults import Fault, FaultLog, FaultsError, Place, did_you_mean
from sheetgen.lookup import NotFoundError, column, frame
from sheetgen.quantities import Registry, registry
from sheetgen.quantities.batch import Batch, material_batch, specimen_batch
from sheetgen.records import Folder, Imprint, Record, Source, read_folder
from sheetgen.records.imprint import THRESHOLDS
from sheetgen.sheet import Derivation, Row, Sheet
from sheetgen.standing.crosschecks import check_names
from sheetgen.standing.grading import check_thresholds
from sheetgen.standing.limits import Indicators
from sheetgen.standing.strict import strict_faults
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
        return cls._derived(read_folder(Path(path)), draws, seed)

    @classmethod
    def load_untrusted(cls, path: str | Path) -> Handbook:
        """Read and derive a folder of strangers: what it names as own quantities is left out, and a remark says so."""
        return cls._derived(_without_code(read_folder(Path(path))))

    @classmethod
    def _derived(cls, folder: Folder, draws: int = 0, seed: int = SEED) -> Handbook:
        declared = registry_of(folder.imprint)
        log = FaultLog()
        check_thresholds(folder.imprint, declared.assumptions, log)
        check_names(folder.imprint, log)
        log.raise_if_any()
        sheets = list(derive(folder.records, folder.imprint, declared, draws, seed))
        log.entries += [fault for sheet in sheets for fault in sheet.crosschecks]
        log.raise_if_any()
        return cls(folder, declared, sheets)

    def require_strict(self) -> None:
        """Raise FaultsError where a value has no source or is from memory, or a record is not freshly reviewed."""
        today = datetime.date.today()
        faults = [f for sheet in self.sheets for f in strict_faults(sheet.record, self.imprint, today)]
        if faults:
            raise FaultsError(faults)

    def __getitem__(self, slug: str) -> Sheet:
        """The sheet with a slug; raises NotFoundError, a KeyError, where there is none."""
        try:
            return self._by_slug[slug]
        except KeyError:
            guess = did_you_mean(str(slug), self._by_slug)
            raise NotFoundError(f"The handbook has no material '{slug}'.{guess}") from None

    def __repr__(self) -> str:
        return f"<Handbook {self.imprint.title!r} of {len(self)} sheets>"

    def __iter__(self) -> Iterator[Sheet]:
        return iter(self.sheets)

    def __len__(self) -> int:
        return len(self.sheets)

    def __contains__(self, slug: object) -> bool:
        return slug in self._by_slug

    @cached_property
    def _by_slug(self) -> dict[str, Sheet]:
        return {sheet.record.slug: sheet for sheet in self.sheets}

    @property
    def slugs(self) -> tuple[str, ...]:
        """The slug of each sheet, in the order of `sheets` and of every `array`."""
        return tuple(self._by_slug)

    def array(
        self,
        id: str,
        what: str = "value",
        *,
        at: float | None = None,
        edge: float | None = None,
        photon_energy: float | None = None,
    ) -> np.ndarray:
        """One number of every material as an array of shape (materials,), in the unit `registry[id].unit`.

        `what` is "value", "standard_uncertainty" or "standing". A material that lacks the number, or states it per
        area where the others do per volume, has NaN ("" as a standing). The points are those of `Sheet.number`.
        Raises NotFoundError for a quantity, edge or photon energy that no sheet has.
        """
        if id not in self.registry.published():
            raise NotFoundError(f"The handbook has no quantity '{id}'.{did_you_mean(id, self.registry)}")
        points = {"temperature": at, "edge": edge, "photon_energy": photon_energy}
        return column(self.sheets, id, self.registry[id].unit, what, points)

    def table(self, *ids: str) -> Any:
        """A pandas DataFrame with one line for each number of the given quantities, or of all, specimens included.

        Its columns are material, name, formula, specimen, quantity, value, standard_uncertainty, unit, standing,
        temperature (K), edge (nm) and photon_energy (eV). Raises ImportError where pandas is not installed, and
        NotFoundError for an unknown quantity.
        """
        known = {**self.registry.published(), **self.registry.published("specimen")}
        for id in ids:
            if id not in known:
                raise NotFoundError(f"The handbook has no quantity '{id}'.{did_you_mean(id, known)}")
        return frame(self.sheets, ids)


def _without_code(folder: Folder) -> Folder:
    """The folder as if its imprint named no own quantities or templates; bounds of own assumptions go with them."""
    imprint, remarks = folder.imprint, list(folder.remarks)
    if imprint.own_quantities:
        ours = {*THRESHOLDS, *(assumption.id for assumption in registry().assumptions)}
        message = "own quantities are not trusted here: the file is not run, and what it declares is not derived."
        remarks.append(Fault(Place(str(imprint.own_quantities)), message, "remark"))
        thresholds = {name: bound for name, bound in imprint.thresholds.items() if name in ours}
        imprint = replace(imprint, own_quantities=None, thresholds=thresholds)
    return replace(folder, imprint=replace(imprint, templates=None), remarks=tuple(remarks))


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
            of = {row.record.slug: row for row in materials}
            for row in self._rows(specimen_batch(group, self.imprint), "specimen", dimension, of):
                specimens[row.record.slug].append(row)
        return {row.record.slug: Sheet(row, specimens[row.record.slug], self.imprint.edition) for row in materials}

    def _rows(
        self, batch: Batch, scope: str, dimension: int, materials: Mapping[str, Row] = MappingProxyType({})
    ) -> list[Row]:
        derived = propagate(self.declared.plans[scope, dimension], batch)
        derivation = Derivation(derived, Indicators(derived), self.declared, self.imprint, self.draws, self.seed)
        owners = [materials.get(record.slug) for record in batch.records]
        return [Row(derivation, row, scope, owner) for row, owner in enumerate(owners)]
