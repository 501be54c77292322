"""What a sheet states: one declaration per quantity and per assumption, joined in the registry."""

from __future__ import annotations

from collections.abc import Iterable
from functools import cache

from sheetgen.quantities.declaration import Assumption, Comparison, Declarations, Definition
from sheetgen.quantities.registry import Registry

__all__ = ["Assumption", "Comparison", "Declarations", "Definition", "Registry", "assumptions", "registry"]


@cache
def registry() -> Registry:
    """Every quantity and assumption of ours, checked once; raises FaultsError where a declaration cannot work."""
    return registry_with(())


def registry_with(further: Iterable[Declarations]) -> Registry:
    """Our declarations together with further ones, such as a group's own."""
    from sheetgen.quantities import conditions, crystal, finite, gas, heat, optics, transport
    from sheetgen.quantities.batch import input_names

    modules = (crystal, gas, heat, transport, optics, finite, conditions)
    return Registry([*(module.declarations for module in modules), *further], input_names())


def assumptions() -> dict[str, Assumption]:
    """id → assumption; of an assumption with several indicators, the first."""
    found: dict[str, Assumption] = {}
    for assumption in registry().assumptions:
        found.setdefault(assumption.id, assumption)
    return found
