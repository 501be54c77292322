"""What people write: the folder of a handbook, read and checked, with the place of everything that is wrong."""

from sheetgen.records.elements import atomic_number, atomic_weight
from sheetgen.records.folder import read_folder
from sheetgen.records.formulas import composition
from sheetgen.records.model import (
    Caution,
    Crystal,
    Electrons,
    Folder,
    Imprint,
    OpticalPoint,
    Record,
    Review,
    Site,
    Source,
    Specimen,
    Value,
)
from sheetgen.records.schema import record_schema
from sheetgen.records.units import dimension_matches, si_factor, to_si

__all__ = [
    "Caution",
    "Crystal",
    "Electrons",
    "Folder",
    "Imprint",
    "OpticalPoint",
    "Record",
    "Review",
    "Site",
    "Source",
    "Specimen",
    "Value",
    "atomic_number",
    "atomic_weight",
    "composition",
    "dimension_matches",
    "read_folder",
    "record_schema",
    "si_factor",
    "to_si",
]
