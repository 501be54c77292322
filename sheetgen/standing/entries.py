"""Which standing each published entry of a quantity takes."""

from __future__ import annotations

from collections.abc import Sequence

from sheetgen.quantities import Definition
from sheetgen.quantities.inputs import NEARBY
from sheetgen.records import Imprint
from sheetgen.standing.confrontation import Confrontation
from sheetgen.standing.grading import OUTSIDE, UNCHECKED
from sheetgen.standing.limits import Limits
from sheetgen.uncertainty import Derived


def axis_of(definition: Definition) -> str | None:
    """Name of the evaluated array that an entry's point is read from."""
    return "resistivity_temperature" if definition.listed_by == "resistivity" else definition.listed_by


def deciding(
    definition: Definition,
    entries: Sequence[int],
    confrontations: Sequence[Confrontation],
    derived: Derived,
    row: int,
    imprint: Imprint,
) -> dict[int, Confrontation]:
    """Entry → the confrontation that decides its standing.

    Of a list, the entry at exactly the measured temperature, else the nearest within 5 K; a photon energy must
    be the measured one. A single number takes the measurement nearest the reference temperature, that of a film
    only within 5 K.
    """
    chosen: dict[int, tuple[float, Confrontation]] = {}
    for confrontation in confrontations:
        if confrontation.quantity == definition.id:
            found = _place(definition, entries, confrontation, derived, row, imprint)
            if found is not None and (found[0] not in chosen or found[1] < chosen[found[0]][0]):
                chosen[found[0]] = (found[1], confrontation)
    return {entry: confrontation for entry, (_, confrontation) in chosen.items()}


def entry_standing(definition: Definition, entry: int, decided: dict[int, Confrontation], limits: Limits) -> str:
    """The standing of one entry: outside where an assumption is broken there, else what measurement says."""
    if limits.broken(definition, entry) is not None:
        return OUTSIDE
    return decided[entry].standing if entry in decided else UNCHECKED


def _place(definition, entries, confrontation, derived, row, imprint) -> tuple[int, float] | None:
    """(entry, distance) of where a confrontation belongs, or None where no published entry is near enough."""
    axis = axis_of(definition)
    if axis is None:
        at = imprint.reference_temperature if confrontation.temperature is None else confrontation.temperature
        distance = abs(at - imprint.reference_temperature)
        # A film's line is that at the reference resistivity; one measured in the cold is another number.
        return None if confrontation.specimen is not None and distance > NEARBY else (0, distance)
    at, reach = confrontation.temperature, NEARBY
    if axis == "photon_energy":
        at, reach = derived.value(axis, row, confrontation.entry), 0.0
    distances = [(abs(derived.value(axis, row, entry) - at), entry) for entry in entries]
    distance, entry = min(distances, default=(reach + 1, 0))
    return (entry, distance) if distance <= reach else None
