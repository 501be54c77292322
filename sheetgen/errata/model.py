"""What a comparison of two editions says, as data."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

AXES = {"temperature": "K", "edge": "nm", "photon_energy": "eV"}


@dataclass(frozen=True)
class Point:
    """Where a number stands in the data of a material: which quantity, of what, at which temperature and so on.

    `repeat` counts further entries at the same place of an axis, from 0.
    """

    quantity: str
    specimen: str | None = None
    axis: str | None = None
    at: float | None = None
    repeat: int = 0

    def as_json(self) -> dict[str, Any]:
        """The keys by which the data files name the place."""
        where = {"quantity": self.quantity}
        where |= {"specimen": self.specimen} if self.specimen is not None else {}
        return where | ({self.axis: self.at} if self.axis else {})

    @property
    def place(self) -> str:
        """The place as a reader would say it: "F-12", "at 77 K", or nothing."""
        at = [f"at {self.at:g} {AXES[self.axis]}"] if self.axis and self.at is not None else []
        return ", ".join([*([self.specimen] if self.specimen is not None else []), *at])


@dataclass(frozen=True)
class InputChange:
    """Something of a record that differs: one input, or a part of the record that holds several.

    `aspects` says in what: value, uncertainty, unit, temperature, sources, recalled, or for a part "form". `old`
    and `new` are the input as the data files state it; None where there was or is none.
    """

    cause: str
    aspects: tuple[str, ...]
    old: dict[str, Any] | None = None
    new: dict[str, Any] | None = None

    def as_json(self) -> dict[str, Any]:
        """Without what is absent."""
        stated = {"cause": self.cause, "aspects": list(self.aspects), "old": self.old, "new": self.new}
        return {key: value for key, value in stated.items() if value is not None}


@dataclass(frozen=True)
class Share:
    """What one cause alone does to a number, in its unit; None where its size cannot be told."""

    cause: str
    change: float | None = None

    def as_json(self, whole: float | None = None) -> dict[str, Any]:
        """With its part of the whole change, where both are known."""
        stated: dict[str, Any] = {"cause": self.cause}
        if self.change is not None:
            stated["change"] = self.change
            if whole:
                stated["share"] = self.change / whole
        return stated


@dataclass(frozen=True)
class Moved:
    """A number that is no longer what it was; `old` or `new` is None where it is new or withdrawn.

    `change` is new minus old in `unit`, None for lists. `beyond` is "uncertainty" where the number left the
    standard uncertainty of the old edition, "rounding" where it only left its last printed digit, "list" for a
    list, and "its uncertainty" where only the uncertainty itself moved. `because` holds what each cause does alone,
    `interaction` what the causes do together beyond the sum of that. `how` is "derived" or "inferred".
    """

    point: Point
    title: str
    unit: str
    old: dict[str, Any] | None
    new: dict[str, Any] | None
    change: float | None
    beyond: str
    because: tuple[Share, ...] = ()
    interaction: float | None = None
    how: str = "derived"

    @property
    def relative(self) -> float | None:
        """The change over the old value."""
        return self.change / abs(self.old["value"]) if self.change is not None and self.old["value"] else None

    @property
    def in_uncertainties(self) -> float | None:
        """The change over the standard uncertainty of the old edition."""
        spread = self.old.get("standard_uncertainty") if self.old else None
        return self.change / spread if self.change is not None and spread else None

    def as_json(self) -> dict[str, Any]:
        """Without what is absent."""
        stated = {
            **self.point.as_json(),
            "title": self.title,
            "unit": self.unit,
            "old": self.old,
            "new": self.new,
            "change": self.change,
            "relative_change": self.relative,
            "change_in_uncertainties": self.in_uncertainties,
            "beyond": self.beyond,
            "because": [share.as_json(self.change) for share in self.because],
            "interaction": self.interaction,
            "how": self.how,
        }
        return {key: value for key, value in stated.items() if value is not None}


@dataclass(frozen=True)
class StandingChange:
    """A number or an assumption whose standing is another one; `because` names the causes that bring it about alone."""

    point: Point
    title: str
    kind: str  # "quantity" or "assumption"
    old: str
    new: str
    because: tuple[str, ...] = ()

    def as_json(self) -> dict[str, Any]:
        """As the data files name things."""
        where = self.point.as_json()
        if self.kind == "assumption":
            where = {"assumption": where.pop("quantity"), **where}
        return {**where, "title": self.title, "old": self.old, "new": self.new, "because": list(self.because)}


@dataclass(frozen=True)
class MaterialErrata:
    """What changed for one material."""

    slug: str
    name: str
    formula: str
    inputs: tuple[InputChange, ...] = ()
    moved: tuple[Moved, ...] = ()
    standings: tuple[StandingChange, ...] = ()
    specimens: dict[str, str] = field(default_factory=dict)  # name → "new" or "withdrawn"

    def as_json(self) -> dict[str, Any]:
        """All of it."""
        return {
            "slug": self.slug,
            "name": self.name,
            "formula": self.formula,
            "inputs": [change.as_json() for change in self.inputs],
            "specimens": self.specimens,
            "numbers": [moved.as_json() for moved in self.moved],
            "standings": [change.as_json() for change in self.standings],
        }


@dataclass(frozen=True)
class ProgramErrata:
    """What changed in how numbers are made: version, constants, definitions by id, and conditions of the imprint."""

    version: tuple[str, str]
    constants: tuple[str, str]
    definitions: dict[str, str]  # id → "changed", "new" or "withdrawn"
    conditions: dict[str, tuple[Any, Any]]

    def as_json(self) -> dict[str, Any]:
        """Pairs as old and new."""
        pair = lambda two: {"old": two[0], "new": two[1]}  # noqa: E731
        return {
            "version": pair(self.version),
            "constants": pair(self.constants),
            "definitions": self.definitions,
            "conditions": {key: pair(two) for key, two in self.conditions.items()},
        }


@dataclass(frozen=True)
class Errata:
    """What changed between two editions. `new_materials` and `withdrawn` map slugs to names."""

    title: str
    old: str
    new: str
    program: ProgramErrata
    new_materials: dict[str, str]
    withdrawn: dict[str, str]
    materials: tuple[MaterialErrata, ...]

    @property
    def count(self) -> int:
        """How many numbers moved."""
        return sum(len(material.moved) for material in self.materials)

    def as_json(self) -> dict[str, Any]:
        """All of it."""
        return {
            "title": self.title,
            "old": self.old,
            "new": self.new,
            "program": self.program.as_json(),
            "new_materials": self.new_materials,
            "withdrawn_materials": self.withdrawn,
            "materials": [material.as_json() for material in self.materials],
        }
