"""What a formula of several elements suggests: who gives and who takes electrons, a name, a common lattice."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from sheetgen.drafting.elements import usual

# Electrons that an atom takes to fill its outer shell.
TAKERS = {
    **dict.fromkeys(("F", "Cl", "Br", "I"), 1),
    **dict.fromkeys(("O", "S", "Se", "Te"), 2),
    **dict.fromkeys(("N", "P", "As", "Sb"), 3),
    "C": 4,
}
# Electrons that a metal gives beside a taker: all outside its closed shells.
GIVERS = {
    **dict.fromkeys(("Li", "Na", "K", "Rb", "Cs"), 1),
    **dict.fromkeys(("Be", "Mg", "Ca", "Sr", "Ba", "Zn", "Cd"), 2),
    **dict.fromkeys(("Al", "Ga", "In", "Sc", "Y", "La"), 3),
    **dict.fromkeys(("Ti", "Zr", "Hf"), 4),
    **dict.fromkeys(("V", "Nb", "Ta"), 5),
}
_IDES = {
    "F": "fluoride", "Cl": "chloride", "Br": "bromide", "I": "iodide", "O": "oxide", "S": "sulfide",
    "Se": "selenide", "Te": "telluride", "N": "nitride", "P": "phosphide", "As": "arsenide", "Sb": "antimonide",
    "C": "carbide",
}  # fmt: skip
_MANY = {1: "", 2: "di", 3: "tri", 4: "tetra"}
_LATTICES = {
    "zincblende": "AlAs AlP AlSb GaAs GaP GaSb InAs InP InSb ZnTe CdTe",
    "rocksalt": "TiN ZrN HfN VN NbN TiC ZrC HfC VC NbC TaC MgO CaO NaCl KCl",
    "cscl": "CuZn NiAl FeAl CsCl",
}
COMMON_LATTICES = {formula: lattice for lattice, formulas in _LATTICES.items() for formula in formulas.split()}


@dataclass(frozen=True)
class Valences:
    """Electrons that each element gives (negative: takes), as written, with the reasoning as a sentence.

    `electrons` is empty where nothing follows; the reason then says why and what to give instead.
    """

    electrons: dict[str, str]
    reason: str


def valences(composition: Mapping[str, float]) -> Valences:
    """The usual count of conduction electrons for a formula."""
    table = usual()
    if len(composition) == 1:
        (element,) = composition
        if table[element].valence:
            return Valences({element: table[element].valence}, table[element].reason)
        return Valences({}, f"no count of conduction electrons is usual for {table[element].name}")
    takers = [element for element in composition if element in TAKERS]
    if not takers:
        return _alloy(composition)
    givers = [element for element in composition if element not in takers]
    if len(takers) == 1 and givers and all(element in GIVERS for element in givers):
        return _filled_shells(composition, takers[0], givers)
    return Valences({}, "no count of conduction electrons follows from this formula alone")


def _alloy(composition: Mapping[str, float]) -> Valences:
    table = usual()
    unknown = [table[element].name for element in composition if not table[element].valence]
    if unknown:
        return Valences({}, f"no count of conduction electrons is usual for {' and '.join(unknown)}")
    electrons = {element: table[element].valence for element in composition}
    reasons = "; ".join(f"{element}: {table[element].reason}" for element in composition)
    return Valences(electrons, f"each atom gives what it gives in its own metal. {reasons}")


def _filled_shells(composition: Mapping[str, float], taker: str, givers: list[str]) -> Valences:
    taken = TAKERS[taker]
    left = sum(GIVERS[element] * composition[element] for element in givers) - taken * composition[taker]
    given = " and ".join(f"{element} gives {GIVERS[element]}" for element in givers)
    counted = f"{given}, {taker} takes {taken} to fill its shell"
    if left > 1e-9:
        electrons = {element: str(GIVERS.get(element, -taken)) for element in composition}
        return Valences(electrons, f"{counted}; {left:.4g} per formula unit {'is' if left == 1 else 'are'} left")
    balance = "nothing is left" if left > -1e-9 else "there are not enough"
    return Valences({}, f"{counted}, and {balance}: count the carriers of doping or defects by their density")


def usual_name(formula: str, composition: Mapping[str, float]) -> str:
    """What the material is called where the formula settles it (Copper, Gallium arsenide), else the formula."""
    table = usual()
    if len(composition) == 1 and formula in table:
        return table[formula].name.capitalize()
    if len(composition) == 2:
        (first, one), (second, many) = composition.items()
        if one == 1 and many in _MANY and second in _IDES and first not in TAKERS:
            return f"{table[first].name} {_MANY[int(many)]}{_IDES[second]}".capitalize()
    return formula


def common_lattice(composition: Mapping[str, float]) -> str:
    """The lattice that is common at room temperature, or ""; recalled."""
    if len(composition) == 1:
        (element,) = composition
        return usual()[element].lattice
    if set(composition.values()) != {1}:
        return ""
    # In any order of the elements: the name of the lattice puts one on each kind of site.
    return next((lattice for text, lattice in COMMON_LATTICES.items() if _same_elements(text, composition)), "")


def _same_elements(formula: str, composition: Mapping[str, float]) -> bool:
    return "".join(composition) == formula or "".join(reversed(list(composition))) == formula
