"""What a handbook's folder says once it has been read: plain, frozen data without units library or YAML."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

from sheetgen.faults import Fault, Place


@dataclass(frozen=True, slots=True)
class Value:
    """One number as a person wrote it, with its unit, uncertainty, temperature and sources.

    `value` and `standard_uncertainty` are in `unit`; `si` and `si_uncertainty` in the coherent SI unit (angles in
    radians, temperatures in kelvins). An uncertainty is None where none was stated.
    """

    value: float
    standard_uncertainty: float | None
    unit: str
    si: float
    si_uncertainty: float | None
    temperature: float | None
    sources: tuple[str, ...]
    recalled: bool
    note: str
    text: str
    place: Place


@dataclass(frozen=True, slots=True)
class Site:
    """One atom of the conventional cell; `position` holds fractions of the cell edges in [0, 1)."""

    element: str
    position: tuple[float, float, float]
    occupancy: float


@dataclass(frozen=True, slots=True)
class Crystal:
    """A conventional cell and every site in it.

    `b` is None where it equals a; where `c` and `c_over_a` are both None, c equals a. An angle is a plain number of
    degrees where the lattice fixes it. `angles_tied` says that beta and gamma equal alpha, a Value.
    """

    lattice: str
    a: Value
    b: Value | None
    c: Value | None
    c_over_a: Value | None
    alpha: Value | float
    beta: Value | float
    gamma: Value | float
    sites: tuple[Site, ...]
    angles_tied: bool = False


@dataclass(frozen=True, slots=True)
class Electrons:
    """The conduction electrons: by valence (per atom of each element) or by a measured density.

    A mass or a background permittivity that is None was not given: 1, or for the other masses the effective mass.
    """

    valence: dict[str, Value] | None = None
    density: Value | None = None
    dimension: int = 3
    effective_mass: Value | None = None
    conductivity_mass: Value | None = None
    optical_mass: Value | None = None
    background_permittivity: Value | None = None
    valleys: int = 1
    charge: str = "electron"
    note: str = ""


@dataclass(frozen=True, slots=True)
class OpticalPoint:
    """A measured refractive index n + ik at one photon energy."""

    photon_energy: Value
    n: Value
    k: Value
    place: Place


@dataclass(frozen=True, slots=True)
class Specimen:
    """A film, wire, particle or cube of the material, as measured or imagined (`invented`)."""

    name: str
    form: str
    thickness: Value | None
    diameter: Value | None
    edge: Value | None
    grain_size: Value | None
    specularity: Value | None
    grain_reflection: Value | None
    resistivity: Value | None
    note: str
    invented: bool
    place: Place


@dataclass(frozen=True, slots=True)
class Caution:
    """What can hurt someone, with the GHS hazard codes where there are any."""

    text: str
    hazard: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Review:
    """Whether someone has checked the record; `date` is ISO 8601 or empty."""

    state: str
    by: str = ""
    date: str = ""


@dataclass(frozen=True, slots=True)
class Record:
    """What one person knows about one material.

    `composition` counts atoms per formula unit. `measured` has the record's keys with underscores, the refractive
    index apart in `optical`. `inputs` holds every value of the record under its id ("structure.a",
    "measured.resistivity@77"), in the order of the record.
    """

    slug: str
    name: str
    formula: str
    composition: dict[str, float]
    crystal: Crystal | None
    electrons: Electrons
    measured: dict[str, tuple[Value, ...]]
    optical: tuple[OpticalPoint, ...]
    specimens: tuple[Specimen, ...]
    cautions: tuple[Caution, ...]
    review: Review | None
    notes: str
    path: Path
    place: Place
    remarks: tuple[Fault, ...]
    inputs: dict[str, Value]


@dataclass(frozen=True, slots=True)
class Look:
    """Colours by name for the light and for the dark ("#0d3f6b"), and the logo as (file name, content)."""

    light: dict[str, str] = field(default_factory=dict)
    dark: dict[str, str] = field(default_factory=dict)
    logo: tuple[str, bytes] | None = None


@dataclass(frozen=True, slots=True)
class OwnPage:
    """A page in Markdown: its heading, and what follows it."""

    slug: str
    title: str
    text: str


@dataclass(frozen=True, slots=True)
class Imprint:
    """Who publishes the handbook and how: handbook.yaml. Temperatures in K, the reference temperature first.

    `date` is the day of the edition (ISO 8601) or empty, `previous_edition` the data file of the one before it.
    `remarks_as_faults` names the cross-checks that stop a press, `review_interval` counts months.
    `templates` is the folder of the group's own ones, `pages` are its own pages.
    """

    title: str
    group: str
    edition: str
    licence: str
    language: str
    contact: str
    base_address: str
    reference_temperature: float
    temperatures: tuple[float, ...]
    paper: str
    units: dict[str, str]
    thresholds: dict[str, float | tuple[float | None, ...]]
    own_quantities: Path | None
    place: Place
    date: str = ""
    previous_edition: Path | None = None
    remarks_as_faults: tuple[str, ...] = ()
    review_interval: int | None = None
    look: Look = field(default_factory=Look)
    templates: Path | None = None
    pages: tuple[OwnPage, ...] = ()


@dataclass(frozen=True, slots=True)
class Source:
    """An entry of sources.bib. Every text is plain Unicode, `bibtex` is the entry as written."""

    key: str
    kind: str
    title: str
    authors: tuple[str, ...]
    year: str
    fields: dict[str, str]
    text: str
    link: str | None
    bibtex: str
    note: str
    place: Place


@dataclass(frozen=True, slots=True)
class Folder:
    """A whole handbook as read: imprint, sources by key, records sorted by slug, remarks sorted by place."""

    path: Path
    imprint: Imprint
    sources: dict[str, Source]
    records: tuple[Record, ...]
    remarks: tuple[Fault, ...] = field(default=())
