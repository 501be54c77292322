"""A small handbook for the tests of the pages: objects with the attributes that a loaded handbook has.

Four materials of very different kinds: copper (well known), lead (hazards, a draft), n-GaAs (a carrier density), a
two-dimensional gas (no crystal, no volume).
"""

from __future__ import annotations

import math
from pathlib import Path
from types import SimpleNamespace

from sheetgen.faults import Place
from sheetgen.quantities.declaration import Comparison, Declarations
from sheetgen.quantities.registry import Registry
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

HBAR, MASS, CHARGE, BOLTZMANN, EPSILON, BOHR = (
    1.054571817e-34,
    9.1093837e-31,
    1.602176634e-19,
    1.380649e-23,
    8.8541878e-12,
    5.29177e-11,
)
HOSTILE = "<script>alert('x')</script>"

declarations = Declarations()
quantity = declarations.quantity
CRYSTAL, GAS = {"section": "Crystal"}, {"section": "Electron gas at T = 0"}
HEAT, TRANSPORT = {"section": "Heat and magnetism"}, {"section": "Transport"}
OPTICS, SMALL, SPECIMENS = {"section": "Optics"}, {"section": "Finite specimens"}, {"section": "Specimens"}
BOOK = "ashcroft1976, ch. 2"


@quantity(
    symbol=r"V_\mathrm{c}",
    unit="angstrom^3",
    formula=r"a b c \sqrt{1 - \cos^2\alpha - \cos^2\beta - \cos^2\gamma}",
    source=BOOK,
    **CRYSTAL,
)
def cell_volume(lattice_constant):
    """Volume of the conventional cell"""


@quantity(
    symbol=r"\rho_\mathrm{m}",
    unit="g/cm^3",
    formula=r"\frac{M}{V_\mathrm{c}}",
    source=BOOK,
    **CRYSTAL,
    comparison=Comparison("mass_density", "ratio of densities", "heavier", "lighter"),
)
def mass_density(cell_volume):
    """Mass density

    From the cell and the standard atomic weights.
    """


@quantity(
    symbol="",
    unit="angstrom",
    formula=r"\left\{(d_i, z_i)\right\}",
    source=BOOK,
    form="shells",
    carries_uncertainty=False,
    **CRYSTAL,
)
def neighbour_shells(lattice_constant):
    """Shells of neighbours"""


@quantity(symbol="n", unit="1/nm^3", formula=r"\frac{Z}{V_\mathrm{c}}", source=BOOK, **GAS)
def electron_density(cell_volume):
    """Density of conduction electrons"""


@quantity(symbol="n_2", unit="1/cm^2", formula="n_2", source="ando1982", dimensions=(2,), **GAS)
def sheet_density(carrier_sheet_density):
    """Electrons per area"""


@quantity(symbol=r"r_\mathrm{s}", unit="1", formula=r"\left(\frac{3}{4\pi n}\right)^{1/3} / a_0", source=BOOK, **GAS)
def electron_sphere_radius(electron_density):
    """Radius of the sphere that holds one electron"""


@quantity(
    id="electron_sphere_radius",
    symbol=r"r_\mathrm{s}",
    unit="1",
    formula=r"(\pi n_2)^{-1/2} / a_0",
    source="ando1982",
    dimensions=(2,),
    **GAS,
)
def electron_disc_radius(sheet_density):
    """Radius of the disc that holds one electron"""


@quantity(
    symbol=r"k_\mathrm{F}",
    unit="1/nm",
    formula=r"\left(6\pi^2 n/g\right)^{1/3}",
    source=BOOK,
    assumes=("flat_potential",),
    dimensions=(3, 2),
    **GAS,
)
def fermi_wavevector(electron_density):
    """Fermi wavevector"""


@quantity(
    symbol=r"E_\mathrm{F}",
    unit="eV",
    formula=r"\frac{\hbar^2 k_\mathrm{F}^2}{2 m}",
    source=BOOK,
    assumes=("flat_potential",),
    dimensions=(3, 2),
    **GAS,
)
def fermi_energy(fermi_wavevector):
    """Fermi energy

    Energy of the highest filled level, counted from the lowest.
    """


@quantity(
    symbol=r"v_\mathrm{F}",
    unit="m/s",
    formula=r"\sqrt{2 E_\mathrm{F} / m_\mathrm{c}}",
    source=BOOK,
    assumes=("flat_potential",),
    dimensions=(3, 2),
    **GAS,
)
def fermi_velocity(fermi_energy):
    """Fermi velocity"""


@quantity(
    symbol=r"\hbar\omega_\mathrm{p}",
    unit="eV",
    formula=r"\hbar \sqrt{\frac{n e^2}{\varepsilon_0 \varepsilon_\mathrm{b} m_\mathrm{o}}}",
    source=BOOK,
    assumes=("one_band",),
    **GAS,
    comparison=Comparison("plasma_energy", "ratio of plasma energies", "stiffer", "screened"),
)
def plasma_energy(electron_density):
    """Plasma energy"""


@quantity(
    symbol=r"\mu",
    unit="eV",
    formula=r"n = \int_0^\infty g(E) f(E)\,\mathrm{d}E",
    source=BOOK,
    listed_by="temperature",
    **HEAT,
)
def chemical_potential(fermi_energy):
    """Chemical potential"""


@quantity(
    symbol=r"\gamma",
    unit="mJ/(mol K^2)",
    formula=r"\frac{\pi^2}{3} k_\mathrm{B}^2 g(E_\mathrm{F})",
    source=BOOK,
    assumes=("degenerate_gas", "independent_electrons"),
    **HEAT,
    comparison=Comparison("heat_coefficient", "thermal mass ratio", "heavier electrons", "lighter electrons"),
)
def heat_coefficient(fermi_energy):
    """Coefficient of the electronic heat capacity"""


@quantity(
    symbol=r"\tau",
    unit="fs",
    formula=r"\frac{m_\mathrm{c}}{n e^2 \rho}",
    source=BOOK,
    assumes=("defined_paths",),
    listed_by="resistivity",
    dimensions=(3, 2),
    **TRANSPORT,
)
def relaxation_time(electron_density):
    """Relaxation time"""


@quantity(
    symbol="l",
    unit="nm",
    formula=r"v_\mathrm{F} \tau",
    source=BOOK,
    assumes=("defined_paths", "degenerate_gas"),
    listed_by="resistivity",
    dimensions=(3, 2),
    **TRANSPORT,
)
def mean_free_path(relaxation_time):
    """Mean free path"""


@quantity(
    symbol=r"R_\mathrm{H}",
    unit="m^3/C",
    formula=r"-\frac{1}{n e}",
    source=BOOK,
    **TRANSPORT,
    comparison=Comparison("hall_coefficient", "ratio of Hall coefficients", "fewer carriers", "more carriers", "holes"),
)
def hall_coefficient(electron_density):
    """Hall coefficient"""


@quantity(
    symbol="R",
    unit="1",
    formula=r"\left|\frac{\sqrt{\varepsilon} - 1}{\sqrt{\varepsilon} + 1}\right|^2",
    source=BOOK,
    assumes=("one_band",),
    listed_by="photon_energy",
    **OPTICS,
)
def normal_reflectance(plasma_energy):
    """Reflectance at normal incidence"""


@quantity(
    symbol="",
    unit="1",
    formula=r"g \sum_{i,j,k \ge 1} \left[ i^2 + j^2 + k^2 \le (k_\mathrm{F} L/\pi)^2 \right]",
    source=BOOK,
    listed_by="edge",
    carries_uncertainty=False,
    **SMALL,
)
def states_hard_wall(fermi_wavevector):
    """States in a cube with hard walls"""


@quantity(
    symbol=r"\rho_\mathrm{film}",
    unit="uohm cm",
    formula=r"\rho F(d/l, p)",
    source="mayadas1970",
    scope="specimen",
    **SPECIMENS,
)
def film_resistivity(mean_free_path):
    """Resistivity of the film"""


@declarations.assumption(
    indicator="T/T_F",
    formula=r"T/T_\mathrm{F}",
    source="common practice, no source",
    strained=0.1,
    broken=0.3,
    listed_by="temperature",
)
def degenerate_gas(fermi_energy):
    """The gas is degenerate

    The temperature is small beside the Fermi temperature.
    """


@declarations.assumption(indicator="r_s*", formula=r"r_\mathrm{s}^*", source=BOOK, strained=4.0, broken=40.0)
def independent_electrons(electron_sphere_radius):
    """The electrons do not notice each other

    Exchange and correlation are left out, which is a small error only in a dense gas.
    """


@declarations.assumption(
    indicator="k_F/k_zone", formula=r"k_\mathrm{F}/k_\mathrm{zone}", source=BOOK, strained=0.9, broken=None
)
def flat_potential(fermi_wavevector):
    """The potential is flat

    The Fermi sphere stays clear of the zone faces.
    """


@declarations.assumption(
    indicator="interband threshold / photon energy",
    formula=r"E_\mathrm{ib}/\hbar\omega",
    source=BOOK,
    strained=2.0,
    broken=1.0,
    below=True,
    listed_by="photon_energy",
)
def one_band(plasma_energy):
    """One band answers the light

    Photons stay below the onset of transitions between bands.
    """


@declarations.assumption(
    indicator="k_F l",
    formula=r"k_\mathrm{F} l",
    source="ioffe1960",
    strained=10.0,
    broken=1.0,
    below=True,
    listed_by="resistivity",
)
def defined_paths(mean_free_path):
    """Electrons have paths

    The path between collisions is long beside the wavelength.
    """


INPUTS = ("lattice_constant", "carrier_sheet_density")
REGISTRY = Registry([declarations], INPUTS)


def value(number, uncertainty=None, unit="1", temperature=None, sources=("matula1979",), recalled=False, note=""):
    """A value as the reader of records gives it."""
    return Value(
        number,
        uncertainty,
        unit,
        number,
        uncertainty,
        temperature,
        sources,
        recalled,
        note,
        f"{number} {unit}",
        Place("sample.yaml", 3, 4),
    )


def source(key, authors, year, title, link=None, note=""):
    text = f"{', '.join(authors)}. {title}. {year}."
    return Source(
        key,
        "article",
        title,
        authors,
        year,
        {"journal": "J"},
        text,
        link,
        f"@article{{{key}}}",
        note,
        Place("sources.bib", 1),
    )


SOURCES = {
    found.key: found
    for found in (
        source(
            "straumanis1969",
            ("Straumanis, M. E.", "Yu, L. S."),
            "1969",
            "Lattice parameters of copper",
            "https://doi.org/10.1107/S0567739469001549",
        ),
        source(
            "matula1979", ("Matula, R. A.",), "1979", "Electrical resistivity of copper, gold, palladium, and silver"
        ),
        source("hostile2000", (HOSTILE,), "2000", f"{HOSTILE} & <b>more</b>", "javascript:alert(1)", f"{HOSTILE} note"),
    )
}


def imprint(**changed) -> Imprint:
    fields = {
        "title": "Free-electron handbook",
        "group": "Marrow Point Thin-Film Group",
        "edition": "2026.1",
        "licence": "CC-BY-4.0",
        "language": "en-GB",
        "contact": "handbook@marrow-point.example",
        "base_address": "",
        "reference_temperature": 293.15,
        "temperatures": (293.15, 4.2, 77.0),
        "paper": "A4",
        "units": {},
        "thresholds": {},
        "own_quantities": None,
        "place": Place("handbook.yaml"),
    }
    return Imprint(**(fields | changed))


def entry(number, uncertainty=None, unit="1", standing="unchecked", budget=None, **axis):
    """One entry of the machine-readable sheet; a number without uncertainty carries neither that nor a budget."""
    found = {
        **axis,
        "value": number,
        "unit": unit,
        "assumes": [],
        "depends_on": list(budget or []),
        "standing": standing,
    }
    return found | ({"standard_uncertainty": uncertainty, "budget": budget or {}} if uncertainty else {})


def gas_entries(density, relative, budget, mass=1.0):
    """Entries of everything that follows from a density (1/m³) with its relative uncertainty."""
    wavevector = (3 * math.pi**2 * density) ** (1 / 3)
    energy = (HBAR * wavevector) ** 2 / (2 * MASS * mass)
    plasma = HBAR * math.sqrt(density * CHARGE**2 / (EPSILON * MASS * mass)) / CHARGE
    radius = (3 / (4 * math.pi * density)) ** (1 / 3) / BOHR
    u = lambda number, power: abs(number) * relative * power  # noqa: E731
    return energy, {
        "electron_density": entry(density * 1e-27, u(density * 1e-27, 1), "1/nm^3", budget=budget),
        "electron_sphere_radius": entry(radius, u(radius, 1 / 3), budget=budget),
        "fermi_wavevector": entry(wavevector * 1e-9, u(wavevector * 1e-9, 1 / 3), "1/nm", budget=budget),
        "fermi_energy": entry(energy / CHARGE, u(energy / CHARGE, 2 / 3), "eV", budget=budget),
        "fermi_velocity": entry(
            math.sqrt(2 * energy / MASS / mass), u(math.sqrt(2 * energy / MASS / mass), 1 / 3), "m/s", budget=budget
        ),
        "plasma_energy": entry(plasma, u(plasma, 1 / 2), "eV", "outside", budget),
        "hall_coefficient": entry(-1 / (density * CHARGE), u(1 / (density * CHARGE), 1), "m^3/C", "adjust", budget),
        "chemical_potential": [
            entry(energy / CHARGE * (1 - 1e-5 * t / 293), None, "eV", temperature=t) for t in (293.15, 4.2, 77.0)
        ],
    }


def path_entries(density, velocity, resistivities, budget, mass=1.0):
    """Relaxation times and paths, one for each (resistivity in ohm m, its uncertainty, temperature)."""
    times, paths = [], []
    for resistivity, uncertainty, temperature in resistivities:
        time = MASS * mass / (density * CHARGE**2 * resistivity)
        share = uncertainty / resistivity
        times.append(entry(time * 1e15, time * 1e15 * share, "fs", budget=budget, temperature=temperature))
        paths.append(
            entry(velocity * time * 1e9, velocity * time * 1e9 * share, "nm", budget=budget, temperature=temperature)
        )
    return {"relaxation_time": times, "mean_free_path": paths}


def confrontation(quantity, title, model, measured, unit, ratio, spread, standing, meaning, sources, **where):
    where = {"temperature": None, "photon_energy": None, "specimen": None} | where
    return SimpleNamespace(
        quantity=quantity,
        title=title,
        model=model,
        measured=measured,
        unit=unit,
        ratio=ratio,
        ratio_uncertainty=spread,
        standing=standing,
        meaning=meaning,
        reason="" if ratio is None else f"measured over model is {ratio:.3g}",
        sources=sources,
        **where,
    )


def check(id, value, bound, standing, reason, **where):
    declared = next(assumption for assumption in REGISTRY.assumptions if assumption.id == id)
    where = {"temperature": None, "photon_energy": None, "specimen": None} | where
    return SimpleNamespace(
        id=id,
        indicator=declared.indicator,
        value=value,
        bound=bound,
        standing=standing,
        title=declared.title,
        sentence=declared.sentence,
        source=declared.source,
        covers=REGISTRY.resting_on(id),
        reason=reason,
        **where,
    )


def line(quantity, title, symbol, reason, factor=None, spread=None):
    return SimpleNamespace(
        quantity=quantity, title=title, symbol=symbol, reason=reason, factor=factor, factor_uncertainty=spread
    )


def sheet(record, quantities, answer, confrontations=(), checks=(), missing=None, specimens=()):
    inputs = {
        name: {"value": v.value, "unit": v.unit, "sources": list(v.sources), "recalled": v.recalled}
        | ({"standard_uncertainty": v.standard_uncertainty} if v.standard_uncertainty is not None else {})
        | ({"temperature": v.temperature} if v.temperature is not None else {})
        for name, v in record.inputs.items()
    }
    data = {
        "slug": record.slug,
        "name": record.name,
        "formula": record.formula,
        "edition": "2026.1",
        "constants": "CODATA 2022",
        "inputs": inputs,
        "quantities": quantities,
        "held_against": [],
        "assumptions": [],
        "specimens": list(specimens),
    }

    def entries(id):
        found = quantities.get(id, [])
        return found if isinstance(found, list) else [found]

    return SimpleNamespace(
        record=record,
        data=data,
        answer=SimpleNamespace(**answer),
        confrontations=tuple(confrontations),
        checks=tuple(checks),
        missing=missing or {},
        entries=entries,
    )


def record(slug, name, formula, crystal=None, electrons=None, inputs=None, **further):
    fields = {
        "composition": {formula: 1.0},
        "measured": {},
        "optical": (),
        "specimens": (),
        "cautions": (),
        "review": None,
        "notes": "",
        "path": Path(f"{slug}.yaml"),
        "place": Place(f"{slug}.yaml"),
        "remarks": (),
    }
    return Record(
        slug=slug,
        name=name,
        formula=formula,
        crystal=crystal,
        electrons=electrons or Electrons(),
        inputs=inputs or {},
        **(fields | further),
    )


def copper():
    a = value(3.6149, 0.0002, "Å", 293.15, ("straumanis1969",))
    crystal = Crystal("fcc", a, None, None, None, 90.0, 90.0, 90.0, (Site("Cu", (0.0, 0.0, 0.0), 1.0),))
    inputs = {
        "structure.a": a,
        "electrons.valence": value(1.0, None, "1", sources=()),
        "measured.resistivity": value(1.676, 0.005, "µΩ cm", 293.15),
        "measured.resistivity@77": value(0.2, None, "µΩ cm", 77.0, recalled=True, note="quoted from memory"),
        "measured.heat_coefficient": value(0.695, 0.01, "mJ/(mol K²)", sources=("matula1979", "hostile2000")),
        "measured.refractive_index.1.photon_energy": value(1.96, None, "eV"),
        "measured.refractive_index.1.n": value(0.25, None),
        "measured.refractive_index.1.k": value(3.41, None),
        "specimens.1.thickness": value(40.0, 2.0, "nm"),
    }
    film = Specimen(
        "F-12",
        "film",
        inputs["specimens.1.thickness"],
        None,
        None,
        None,
        None,
        None,
        None,
        "sputtered",
        True,
        Place("copper.yaml", 9),
    )
    density = 4 / 3.6149e-10**3
    energy, quantities = gas_entries(density, 1.66e-4, {"structure.a": 1.0})
    velocity = math.sqrt(2 * energy / MASS)
    shared = {"measured.resistivity": 0.97, "structure.a": 0.03}
    quantities = {
        "cell_volume": entry(47.238, 0.0078, "angstrom^3", budget={"structure.a": 1.0}),
        "mass_density": entry(8.9349, 0.0015, "g/cm^3", "agrees", {"structure.a": 1.0}),
        "neighbour_shells": entry(
            [
                {"distance": 2.5561, "count": 12.0},
                {"distance": 3.6149, "count": 6.0},
                {"distance": 4.4273, "count": 24.0},
            ],
            None,
            "angstrom",
        ),
        **quantities,
        "heat_coefficient": entry(0.50358, 0.00006, "mJ/(mol K^2)", "adjust", {"structure.a": 1.0}),
        **path_entries(density, velocity, [(1.676e-8, 5e-11, 293.15), (2e-9, 1e-11, 77.0)], shared),
        "normal_reflectance": [
            entry(r, None, "1", "outside" if e > 2 else "unchecked", photon_energy=e)
            for e, r in ((0.1, 0.9961), (0.5, 0.9957), (1.0, 0.9955), (1.96, 0.9952), (3.0, 0.9949), (6.0, 0.9931))
        ],
        "states_hard_wall": [
            entry(float(n), None, "1", edge=edge)
            for edge, n in ((1, 36), (2, 454), (5, 8940), (10, 77912), (20, 650106), (50, 10393482))
        ],
    }
    answer = {
        "use": (line("mass_density", "Mass density", r"\rho_\mathrm{m}", "the weighed density agrees within 0.3 %"),),
        "scale": (
            line(
                "heat_coefficient",
                "Coefficient of the electronic heat capacity",
                r"\gamma",
                "the electrons are heavier by phonons",
                1.38,
                0.02,
            ),
            line(
                "hall_coefficient",
                "Hall coefficient",
                r"R_\mathrm{H}",
                "the necks of the Fermi surface cost carriers",
                0.73,
                0.015,
            ),
        ),
        "avoid": (
            line(
                "plasma_energy", "Plasma energy", r"\hbar\omega_\mathrm{p}", "transitions of the d band begin at 2.1 eV"
            ),
        ),
    }
    confrontations = (
        confrontation(
            "mass_density",
            "Mass density",
            8.9349,
            8.96,
            "g/cm^3",
            1.0028,
            0.001,
            "agrees",
            "The weighed density agrees with the cell.",
            ("matula1979",),
            temperature=293.15,
        ),
        confrontation(
            "heat_coefficient",
            "Coefficient of the electronic heat capacity",
            0.50358,
            0.695,
            "mJ/(mol K^2)",
            1.38,
            0.02,
            "adjust",
            "The electrons carry a cloud of phonons and weigh more.",
            ("matula1979", "hostile2000"),
        ),
        confrontation("plasma_energy", "Plasma energy", None, 7.4, "eV", None, None, "unchecked", "", ("matula1979",)),
        confrontation(
            "film_resistivity",
            "Resistivity of the film",
            2.71,
            3.1,
            "uohm cm",
            1.144,
            0.05,
            "adjust",
            "Something scatters beyond the surfaces.",
            (),
            specimen="F-12",
        ),
    )
    checks = (
        check("degenerate_gas", 0.0036, 0.1, "holds", "far below the bound", temperature=293.15),
        check("degenerate_gas", 5.1e-5, 0.1, "holds", "far below the bound", temperature=4.2),
        check("flat_potential", 0.905, 0.9, "strained", "the sphere comes near the zone face"),
        check("one_band", 1.07, 2.0, "strained", "near the onset", photon_energy=1.96),
        check("one_band", 0.7, 1.0, "broken", "d electrons answer as well", photon_energy=3.0),
        check("defined_paths", 540.0, 10.0, "holds", "long paths", temperature=293.15),
    )
    notes = (
        f"# Why one electron\n\nThe *4s* electron. {HOSTILE} [bad](javascript:alert(1)) "
        "![x](https://evil.example/x.png)\n\n## Detail\n\n- one\n- two"
    )
    specimens = [
        {
            "name": "F-12",
            "form": "film",
            "quantities": {
                "film_resistivity": entry(
                    2.71, 0.06, "uohm cm", "adjust", {"specimens.1.thickness": 0.8, "measured.resistivity": 0.2}
                )
            },
        }
    ]
    made = record(
        "copper",
        "Copper",
        "Cu",
        crystal,
        Electrons(valence={"Cu": inputs["electrons.valence"]}, note="one s electron"),
        inputs,
        specimens=(film,),
        cautions=(
            Caution("The dust is flammable and harms water life.", ("H228", "H410")),
            Caution(f"Sharp foil {HOSTILE}"),
        ),
        review=Review("reviewed", "AB", "2026-11-02"),
        notes=notes,
        optical=(
            OpticalPoint(
                inputs["measured.refractive_index.1.photon_energy"],
                inputs["measured.refractive_index.1.n"],
                inputs["measured.refractive_index.1.k"],
                Place("copper.yaml", 20),
            ),
        ),
    )
    return sheet(
        made, quantities, answer, confrontations, checks, {"chemical_potential_series": "no such input"}, specimens
    )


def lead():
    a = value(4.9508, 0.0005, "Å", 293.15, ("straumanis1969",), recalled=True)
    crystal = Crystal("fcc", a, None, None, None, 90.0, 90.0, 90.0, (Site("Pb", (0.0, 0.0, 0.0), 1.0),))
    inputs = {
        "structure.a": a,
        "electrons.valence": value(4.0, None, "1", sources=()),
        "measured.resistivity": value(20.8, 0.3, "µΩ cm", 293.15),
    }
    density = 16 / 4.9508e-10**3
    energy, quantities = gas_entries(density, 3e-4, {"structure.a": 1.0})
    quantities |= path_entries(
        density, math.sqrt(2 * energy / MASS), [(2.08e-7, 3e-9, 293.15)], {"measured.resistivity": 1.0}
    )
    answer = {
        "use": (),
        "scale": (),
        "avoid": (line("plasma_energy", "Plasma energy", r"\hbar\omega_\mathrm{p}", "bands overlap"),),
    }
    made = record(
        "lead",
        "Lead",
        "Pb",
        crystal,
        Electrons(valence={"Pb": inputs["electrons.valence"]}),
        inputs,
        cautions=(Caution("Lead harms the unborn child.", ("H360FD", "H372", "H410")),),
    )
    return sheet(made, quantities, answer, missing={"mass_density": "a cell is needed"})


def gallium_arsenide():
    density = value(1.0e18, 5e16, "1/cm³", 300.0, ("matula1979",))
    inputs = {"electrons.density": density, "electrons.effective_mass": value(0.067, 0.0005, "1")}
    _, quantities = gas_entries(1e24, 0.05, {"electrons.density": 0.99, "electrons.effective_mass": 0.01}, 0.067)
    checks = (check("degenerate_gas", 0.48, 0.3, "broken", "a warm dilute gas", temperature=293.15),)
    made = record(
        "n-gaas",
        f"Gallium arsenide, n-type {HOSTILE}",
        "GaAs",
        None,
        Electrons(density=density, effective_mass=inputs["electrons.effective_mass"]),
        inputs,
        review=Review("draft"),
    )
    return sheet(made, quantities, {"use": (), "scale": (), "avoid": ()}, checks=checks)


def well():
    density = value(3.0e11, 1e10, "1/cm²", 4.2, ("matula1979",))
    inputs = {"electrons.density": density}
    wavevector = math.sqrt(2 * math.pi * 3e15)
    budget = {"electrons.density": 1.0}
    quantities = {
        "sheet_density": entry(3e11, 1e10, "1/cm^2", budget=budget),
        "electron_sphere_radius": entry(1 / math.sqrt(math.pi * 3e15) / BOHR, 3.2, "1", budget=budget),
        "fermi_wavevector": entry(wavevector * 1e-9, wavevector * 1e-9 / 60, "1/nm", budget=budget),
        "fermi_energy": entry((HBAR * wavevector) ** 2 / (2 * 0.067 * MASS) / CHARGE, 3.6e-4, "eV", budget=budget),
    }
    made = record(
        "well",
        "Quantum well",
        "GaAs",
        None,
        Electrons(density=density, dimension=2),
        inputs,
        review=Review("reviewed", "CD", "2026-10-01"),
    )
    return sheet(made, quantities, {"use": (), "scale": (), "avoid": ()})


def handbook(**changed):
    """The sample handbook; keyword arguments change its imprint."""
    sheets = (copper(), lead(), gallium_arsenide(), well())
    made = imprint(**changed)
    folder = Folder(Path("sample"), made, SOURCES, tuple(found.record for found in sheets))
    return SimpleNamespace(folder=folder, imprint=made, sources=SOURCES, registry=REGISTRY, sheets=sheets, remarks=())


SVG = (
    b'<svg xmlns="http://www.w3.org/2000/svg" width="340pt" height="250pt" viewBox="0 0 340 250"><title>t</title>'
    b'<path d="M20 230Q170 -150 320 230" fill="none" stroke="#123"/></svg>'
)


def figures():
    """One drawn figure for copper."""
    figure = SimpleNamespace(
        id="parabola",
        title="The free-electron parabola",
        description="Energy against wavevector, filled up to the Fermi level.",
        svg=SVG,
        csv=b"k,E\n0,0\n",
    )
    return {"copper": [figure], "lead": [], "n-gaas": []}
