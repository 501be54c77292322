"""The structure of a CIF as lines of a record: spelt out with its source at each constant, or by reference."""

from __future__ import annotations

from sheetgen.drafting.cif import AtomSite, Deposit
from sheetgen.drafting.writing import commented, flow, inside_flow, scalar
from sheetgen.records import Value
from sheetgen.records.spelling import written_key
from sheetgen.records.structure import constants_of

MAXIMUM_SITES = 60  # beyond that a list says less to a reader than the CIF itself


def explicit_structure(deposit: Deposit, cif_name: str, source: str) -> tuple[str, ...]:
    """Space group, constants with temperature and source, and the atoms of the asymmetric unit.

    Empty where the group is not known or the atoms are too many.
    """
    if not deposit.space_group or len(deposit.sites) > MAXIMUM_SITES:
        return ()
    constants = constants_of(deposit.crystal)
    return (
        *commented(f"As {cif_name} beside this file has it, which stays the evidence."),
        "structure:",
        f"  space group: {scalar(deposit.space_group)}",
        *(f"  {written_key(key)}: {_constant(value, source)}" for key, value in constants.items()),
        "  atoms:",
        *(_atom(site) for site in deposit.sites),
    )


def cif_structure(deposit: Deposit, cif_name: str, source: str) -> tuple[str, ...]:
    """A reference to the CIF, which then is read whenever the record is."""
    cited = f" Published in {source}." if source else ""
    return (*commented(f"Cell, symmetry and sites are read from the CIF.{cited}"), "structure:", f"  cif: {cif_name}")


def _constant(value: Value, source: str) -> str:
    written = {"value": inside_flow(value.text)}
    if value.temperature is not None:
        written["at"] = f"{value.temperature:g} K"
    if source:
        written["from"] = inside_flow(source)
    return flow(written)


def _atom(site: AtomSite) -> str:
    written = {"element": scalar(site.element), "position": f"[{', '.join(site.position)}]"}
    if site.occupancy:
        written["occupancy"] = site.occupancy
    return f"    - {flow(written)}  # {site.label}"
