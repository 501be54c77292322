"""What can hurt someone, for a draft to start from: a small table of elements and a few compounds.

The codes are GHS hazard statements, written down from memory; a draft says so and defers to the supplier's sheet.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import NamedTuple


class Hazard(NamedTuple):
    """A caution with its GHS codes."""

    text: str
    codes: tuple[str, ...] = ()


def _elements(symbols: str) -> tuple[str, ...]:
    return tuple(symbols.split())


LAST = (
    "This list starts from a small table and is not complete. The supplier's safety data sheet, local codes and "
    "licensed practice decide. The numbers of the sheet are model values, not design allowables."
)

_ALKALI = "Reacts violently with water; the hydrogen it sets free can ignite, and what is left burns skin and eyes."
_BURNS = "Fine powder, chips and dust can catch fire; some powders do so by themselves in air."
_RARE_EARTH = "Turnings and fine powder can catch fire and, wet, set hydrogen free."
_RADIOACTIVE = "Radioactive: to be had, kept and handled under a licence only."

# Of the element itself, as metal or powder.
ELEMENTS: dict[str, Hazard] = {
    **{element: Hazard(_ALKALI, ("H260", "H314")) for element in ("Li", "Na", "K", "Rb", "Cs")},
    "Be": Hazard(
        "Dust and fume can cause cancer and a lasting lung disease, and are fatal when breathed in.",
        ("H350i", "H330", "H372", "H317"),
    ),
    "Mg": Hazard("Powder and turnings burn fiercely and, wet, set hydrogen free.", ("H228", "H251", "H261")),
    "Ca": Hazard("Sets hydrogen free in contact with water.", ("H261",)),
    "Sr": Hazard("Reacts with water; the hydrogen it sets free can ignite.", ("H260",)),
    "Ba": Hazard("Sets hydrogen free in contact with water; soluble compounds are poisonous.", ("H261", "H301")),
    "Al": Hazard(_BURNS, ("H228", "H261")),
    "Ti": Hazard(_BURNS, ("H228", "H250")),
    "Zr": Hazard(_BURNS, ("H250", "H260")),
    "Hf": Hazard(_BURNS, ("H250",)),
    "Nb": Hazard(_BURNS, ("H250",)),
    "Ta": Hazard(_BURNS, ("H228",)),
    "Mo": Hazard(_BURNS, ("H228",)),
    "W": Hazard(_BURNS, ("H228",)),
    "Fe": Hazard(_BURNS, ("H228", "H251")),
    "Zn": Hazard(_BURNS + " Very toxic to water life; fume causes metal fume fever.", ("H250", "H260", "H410")),
    **{
        element: Hazard(_RARE_EARTH, ("H228",))
        for element in _elements("Sc Y La Ce Pr Nd Sm Eu Gd Tb Dy Ho Er Tm Yb Lu")
    },
    "Cr": Hazard(
        "Hexavalent compounds from etching and plating can cause cancer and sensitise lungs and skin.",
        ("H350", "H340", "H317", "H334"),
    ),
    "Co": Hazard(
        "Dust can cause cancer, sensitises lungs and skin, and may harm fertility.",
        ("H350", "H341", "H360F", "H317", "H334"),
    ),
    "Ni": Hazard("Sensitises skin; dust is suspected of causing cancer and harms the lungs.", ("H351", "H372", "H317")),
    "Cu": Hazard("Fine powder is very toxic to water life and irritates the eyes.", ("H410", "H319")),
    "Ag": Hazard("Fine powder is very toxic to water life.", ("H410",)),
    "Ga": Hazard("Attacks other metals, aluminium above all: keep it away from load-bearing parts.", ("H290",)),
    "In": Hazard("Dust of its compounds harms the lungs.", ("H372",)),
    "Cd": Hazard(
        "Dust and fume are fatal when breathed in and can cause cancer; very toxic to water life.",
        ("H350", "H341", "H361fd", "H330", "H372", "H410"),
    ),
    "Hg": Hazard(
        "Vapour is fatal when breathed in and harms nerves, kidneys and the unborn child.",
        ("H330", "H360D", "H372", "H410"),
    ),
    "Tl": Hazard("Fatal when swallowed or breathed in; builds up in the body.", ("H300", "H330", "H373")),
    "Pb": Hazard(
        "Dust and fume poison; harms the unborn child and builds up in the body.", ("H360FD", "H362", "H372", "H410")
    ),
    "As": Hazard("Poisonous when swallowed or breathed in; compounds can cause cancer.", ("H301", "H331", "H410")),
    "Sb": Hazard("Dust is suspected of causing cancer and harms the lungs.", ("H351", "H373")),
    "Se": Hazard("Poisonous when swallowed or breathed in; builds up in the body.", ("H301", "H331", "H373")),
    "Te": Hazard("Dust harms when breathed in and may harm the unborn child.", ("H332", "H360")),
    "P": Hazard("The white form catches fire in air and is fatal when swallowed.", ("H250", "H300", "H330", "H314")),
    "Os": Hazard(
        "Powder forms the volatile tetroxide in air, which blinds and is fatal when breathed in.",
        ("H300", "H310", "H330", "H314"),
    ),
    "F": Hazard("The gas is fatal when breathed in and feeds any fire.", ("H270", "H330", "H314")),
    "Cl": Hazard("The gas poisons, irritates and feeds fire.", ("H270", "H331", "H315", "H319", "H335", "H400")),
    "Br": Hazard("Vapour is fatal when breathed in; the liquid burns.", ("H330", "H314", "H400")),
    "H": Hazard("Explosive in air between 4 % and 75 %.", ("H220",)),
    "Th": Hazard(_RADIOACTIVE, ()),
    "U": Hazard(_RADIOACTIVE + " Poisonous as a heavy metal.", ("H300", "H330", "H373")),
    **{
        element: Hazard(_RADIOACTIVE, ())
        for element in _elements("Tc Pm Po At Rn Fr Ra Ac Pa Np Pu Am Cm Bk Cf Es Fm Md No Lr")
    },
}

# Of compounds whose dangers are not those of their elements: the set of elements → caution.
COMPOUNDS: dict[frozenset[str], Hazard] = {
    frozenset(("Ga", "As")): Hazard(
        "Dust can cause cancer, harms lungs and blood, and may harm fertility. Acids set free arsine, a deadly gas.",
        ("H350", "H360F", "H372"),
    ),
    frozenset(("In", "P")): Hazard(
        "Dust can cause cancer and harms the lungs. Acids set free phosphine, a deadly gas.",
        ("H350", "H361f", "H372"),
    ),
    frozenset(("In", "O")): Hazard("Dust causes severe, lasting lung disease.", ("H372",)),
    frozenset(("In", "Sn", "O")): Hazard("Dust causes severe, lasting lung disease.", ("H372",)),
    frozenset(("Cd", "Te")): Hazard(
        "Harmful when swallowed, touched or breathed in; cadmium is set free by acids and fire.",
        ("H302", "H312", "H332", "H410"),
    ),
}
# Elements that stay dangerous in whatever they are part of.
LASTING = _elements("Be Cr Co Ni As Se Cd Sb Te Os Hg Tl Pb Th U Tc Pm Po Ra Ac Pa Np Pu Am Cm")

_NON_METALS = frozenset(_elements("H B C N O F Si P S Cl Ge As Se Br Te I"))


def hazards(composition: Mapping[str, float]) -> list[Hazard]:
    """What is known to hurt, the gravest knowledge first; empty where the table says nothing."""
    if len(composition) == 1:
        return [ELEMENTS[element] for element in composition if element in ELEMENTS]
    if known := COMPOUNDS.get(frozenset(composition)):
        return [known]
    # An alloy keeps the dangers of its metals; in a salt or an oxide only some of them last.
    alloy = not _NON_METALS & composition.keys()
    return [_within(element) for element in composition if element in (ELEMENTS if alloy else LASTING)]


def _within(element: str) -> Hazard:
    """The caution of an element as a part of something: whether it holds there is left to the reader."""
    hazard = ELEMENTS[element]
    return Hazard(f"Contains {element}, of which is known: {hazard.text} Look up what holds here.", hazard.codes)
