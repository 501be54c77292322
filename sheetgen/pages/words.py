"""Words and marks that the pages share: standings, lattices, inputs, hazards, dates, chemical formulas."""

from __future__ import annotations

import datetime
import re
from functools import cache

from markupsafe import Markup

from . import numbers

# In the order in which a reader wants to see them.
STANDINGS = ("agrees", "adjust", "undecided", "fails", "outside", "unchecked")
# From the best to the worst.
CONDITIONS = ("holds", "strained", "broken")
LATTICES = {
    "sc": "simple cubic",
    "bcc": "body-centred cubic",
    "fcc": "face-centred cubic",
    "hcp": "hexagonal close-packed",
    "diamond": "diamond cubic",
    "zincblende": "zincblende",
    "rocksalt": "rock salt",
    "cscl": "caesium chloride",
    "bct": "body-centred tetragonal",
}
_INPUT_WORDS = {
    "structure.a": "lattice constant a",
    "structure.b": "lattice constant b",
    "structure.c": "lattice constant c",
    "structure.c_over_a": "axial ratio c/a",
    "structure.alpha": "cell angle α",
    "structure.beta": "cell angle β",
    "structure.gamma": "cell angle γ",
    "electrons.valence": "electrons per atom",
    "electrons.density": "carrier density",
    "measured.debye_temperature": "Debye temperature",
    "measured.transport_debye_temperature": "transport Debye temperature",
    "measured.hall_coefficient": "Hall coefficient",
}
_OPTICAL = re.compile(r"measured\.refractive_index\.(\d+)\.(\w+)")
_SPECIMEN = re.compile(r"specimens\.(\d+)\.(\w+)")


@cache
def standing(word: str) -> Markup:
    """The mark of a standing: its shape is drawn by the style sheet."""
    return Markup('<span class="standing {0}">{0}</span>').format(word)


@cache
def mark(word: str) -> Markup:
    """A standing in a crowded table: its shape alone, the word for those who do not see it; nothing if unchecked."""
    if word == "unchecked":
        return Markup("")
    return Markup('<span class="standing only-mark {0}" role="img" aria-label="{0}"></span>').format(word)


@cache
def condition(word: str) -> Markup:
    """How well an assumption is met."""
    return Markup('<span class="condition {0}">{0}</span>').format(word)


def draft(is_draft: bool) -> Markup:
    """The stamp of a record that nobody has reviewed."""
    return Markup('<span class="draft">draft</span>' if is_draft else "")


def over(power: int, unit: Markup) -> Markup:
    """What a column is counted in: a power of ten and a unit."""
    if not power and not unit:
        return Markup("")
    ten = Markup(f"10<sup>{numbers.signed(power)}</sup>{numbers.NARROW if unit else ''}") if power else ""
    return Markup('<span class="over">{}{}</span>').format(ten, unit)


def input_words(identifier: str, specimens: tuple[str, ...] = ()) -> str:
    """What an input is called on the page: 'structure.a' is the lattice constant a."""
    name, _, kelvins = identifier.partition("@")
    at = f" at {kelvins.replace('#', ' K, no. ')}{'' if '#' in kelvins else ' K'}" if kelvins else ""
    if found := _OPTICAL.fullmatch(name):
        return f"refractive index, point {found[1]}: {found[2].replace('_', ' ')}"
    if found := _SPECIMEN.fullmatch(name):
        number = int(found[1])
        who = specimens[number - 1] if 0 < number <= len(specimens) else found[1]
        return f"{found[2].replace('_', ' ')} of {who}"
    if name.startswith("electrons.valence."):
        return f"electrons per {name.rpartition('.')[2]} atom"
    return (_INPUT_WORDS.get(name) or name.rpartition(".")[2].replace("_", " ")) + at


def lattice_words(lattice: str) -> str:
    """The lattice in full: 'fcc' is face-centred cubic."""
    return LATTICES.get(lattice, lattice.replace("-", " ").replace(" centred", "-centred"))


def chemical(formula: str) -> Markup:
    """A chemical formula with its numbers as subscripts."""
    safe = str(Markup.escape(formula))
    return Markup(re.sub(r"(?<=[A-Za-z)\]])(\d+(?:\.\d+)?)", r"<sub>\1</sub>", safe))


# Titles that begin with one of these keep their capital inside a sentence.
_NAMES = ("Fermi", "Hall", "Debye", "Drude", "Landau", "Pauli", "London", "Thomas", "Lorenz", "Wigner", "Hartree")


def lower_first(title: str) -> str:
    """A title as it stands inside a sentence."""
    return title if title.startswith(_NAMES) or title[1:2].isupper() else title[:1].lower() + title[1:]


_SYMBOL = re.compile(r"(?<!\w)([^\W\d_])_([A-Z]|[a-z0-9]+)")


def symbols(text: str) -> Markup:
    """A text in which symbols such as k_F are set as symbols."""
    return Markup(_SYMBOL.sub(r"<i>\1</i><sub>\2</sub>", str(Markup.escape(text))))


def is_symbol(text: str) -> bool:
    """Whether a text is one symbol of the kind that `symbols` sets, such as k_F."""
    return _SYMBOL.fullmatch(text) is not None


def sentence(text: str) -> str:
    """A phrase as a sentence of its own: capital and full stop."""
    return text[:1].upper() + text[1:] + ("" if text.endswith((".", "!", "?")) else ".")


def factor(value: float, uncertainty: float | None) -> Markup:
    """A factor to scale by, rounded by its uncertainty; three digits where it has none."""
    return numbers.printed(value if uncertainty else float(f"{value:.3g}"), uncertainty).html


_MONTHS = (  # not by strftime, which speaks the language of the machine
    "January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November",
    "December",
)  # fmt: skip


def date(text: str) -> str:
    """An ISO 8601 date in words, as 2 November 2026; any other text as it stands."""
    try:
        day = datetime.date.fromisoformat(text)
    except ValueError:
        return text
    return f"{day.day} {_MONTHS[day.month - 1]} {day.year}"


def language(tag: str) -> str:
    """The language of the program's own words: the handbook's kind of English, else plain English."""
    return tag if re.fullmatch(r"en(-[A-Za-z]{2,8})?", tag) else "en"


def css_string(text: str) -> str:
    """The text inside a CSS string, every character that could end or change it written as an escape."""
    return "".join(char if char.isascii() and char.isalnum() else f"\\{ord(char):x} " for char in text)


def joined(items: list[str]) -> str:
    """Items as a sentence lists them: a, b and c."""
    return items[0] if len(items) == 1 else f"{', '.join(items[:-1])} and {items[-1]}" if items else ""


def unit_of_axis(axis: str) -> tuple[str, str]:
    """What a list runs over, in words, with its unit."""
    return {
        "temperature": ("temperature", "K"),
        "resistivity": ("temperature of the resistivity", "K"),
        "edge": ("edge", "nm"),
        "photon_energy": ("photon energy", "eV"),
    }[axis]
