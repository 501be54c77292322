"""Numbers in the words of a figure: notes beside a curve, titles, and descriptions that are read aloud."""

from __future__ import annotations

import math
import re

from scipy import constants as c

_SUPERSCRIPTS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def number(value: float, digits: int = 3) -> str:
    """A number with some significant digits: plain where that is short, else with a power of ten."""
    if value == 0 or not math.isfinite(value):
        return f"{value:g}"
    mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
    power = int(exponent)
    if -3 <= power < max(digits, 4):
        text = f"{float(f'{value:.{digits - 1}e}'):.{max(digits - 1 - power, 0)}f}"
    else:
        text = f"{mantissa}·10{str(power).translate(_SUPERSCRIPTS)}"
    return text.replace("-", "−")


def energy_unit(largest: float) -> tuple[float, str]:
    """Joules in the unit that suits energies up to the largest (J), and its name: eV, below 0.2 eV meV."""
    return (c.e, "eV") if largest >= 0.2 * c.e else (c.e * 1e-3, "meV")


def energy(joules: float) -> str:
    """An energy with the unit that suits it."""
    factor, name = energy_unit(joules)
    return f"{number(joules / factor)} {name}"


def kelvin(temperature: float) -> str:
    """A temperature as `293 K` or `4.2 K`."""
    return f"{temperature:.1f} K" if temperature < 10 else f"{temperature:.0f} K"


def in_sentence(name: str) -> str:
    """A material's name within a sentence: small where its first word is a word, as it stands where that is not."""
    first = name.split()[0].split("-")[0] if name.split() else ""
    return name[:1].lower() + name[1:] if len(first) > 3 and first.isalpha() and first[1:].islower() else name


def enumeration(items: list[str]) -> str:
    """Items as a list in a sentence."""
    return items[0] if len(items) == 1 else f"{', '.join(items[:-1])} and {items[-1]}"


_SIGNS = {"uohm": "µΩ", "fohm": "fΩ", "ohm": "Ω", "angstrom": "Å", "um": "µm", "uV": "µV"}


def unit_label(unit: str) -> str:
    """A unit such as `mJ/(mol K^2)` as the SI Brochure prints it, mJ mol⁻¹ K⁻²; in brackets where it has parts."""
    over, _, under = unit.partition("/")
    parts = [_power(word, 1) for word in over.split() if word != "1"]
    parts += [_power(word, -1) for word in under.strip("()").split()]
    return parts[0] if len(parts) == 1 else f"({' '.join(parts)})"


def _power(word: str, sign: int) -> str:
    name, _, power = word.partition("^")
    exponent = sign * int(power or 1)
    printed = "".join(_SIGNS.get(piece, piece) for piece in re.split(r"(\W+)", name))
    return printed if exponent == 1 else printed + str(exponent).translate(_SUPERSCRIPTS)
