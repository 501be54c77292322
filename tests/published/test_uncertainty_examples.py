"""Worked examples of uncertainty in print, and the `uncertainties` package as an independent route.

The examples go through the same propagation as the quantities of a sheet: a declaration, a batch of one row.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field

import numpy as np
import pytest
from support.printed import printed
from uncertainties import ufloat, wrap

from sheetgen.quantities.batch import Batch, material_batch, specimen_batch
from sheetgen.quantities.declaration import Declarations
from sheetgen.quantities.evaluate import evaluate
from sheetgen.quantities.registry import Plan, Registry
from sheetgen.uncertainty import Number, propagate

# Relative, of the independent route: so small that no level of a thin film opens or empties on the way, where its
# Fermi energy has a kink.
STEP = 1e-5


def propagated(model, **inputs: tuple[float, float]) -> Number:
    """The value, standard uncertainty and budget of a model of inputs (estimate, standard uncertainty)."""
    declared = Declarations()
    declared.quantity(symbol="y", unit="1", formula="y", source="", section="Crystal", id="result")(model)
    shape = (1, 1, 1)
    batch = Batch(
        records=(None,),
        specimens=(None,),
        values={name: np.full(shape, estimate) for name, (estimate, _) in inputs.items()},
        uncertainties={name: np.full(shape[1:], u) for name, (_, u) in inputs.items()},
        ids={name: [[name]] for name in inputs},
    )
    plan = Registry([declared], inputs).plans["material", 3]
    return propagate(plan, batch).number("result", 0)


def rectangular(half_width: float) -> float:
    """Standard uncertainty of a value that lies anywhere within ± half_width (GUM 4.3.7)."""
    return half_width / math.sqrt(3)


# -------------------------------------------------------------------------------------------------- the GUM's own


def end_gauge(standard, difference, random, systematic, alpha_difference, temperature, cycle, alpha, warmth):
    """Length of an end gauge at 20 °C"""
    deviation = temperature + cycle
    drift = standard * (alpha_difference * deviation + alpha * warmth)
    return standard + difference + random + systematic - drift


END_GAUGE = {
    "standard": (50000623.0, 25.0),
    "difference": (215.0, 5.8),
    "random": (0.0, 3.9),
    "systematic": (0.0, 6.7),
    "alpha_difference": (0.0, rectangular(1e-6)),
    "temperature": (-0.1, 0.2),
    "cycle": (0.0, 0.5 / math.sqrt(2)),
    "alpha": (11.5e-6, rectangular(2e-6)),
    "warmth": (0.0, rectangular(0.05)),
}


def test_end_gauge_of_gum_h_1():
    # JCGM 100:2008, H.1 and table H.1 (lengths in nm, temperatures in °C): l = 50 000 838 nm, u_c = 32 nm; the inputs
    # agree with two published codes of the example that were read. Six of the nine estimates are zero or multiply zero.
    number = propagated(end_gauge, **END_GAUGE)
    assert number.value == printed("50000838")
    assert number.standard_uncertainty == printed("32")


def test_components_of_gum_table_h_1():
    # Table H.1: |c_i| u(x_i) in nm of 25, 9.7 (the comparator's three together), 2.9 and 16.6; α_S and θ contribute 0.
    number = propagated(end_gauge, **END_GAUGE)
    components = {
        name: number.standard_uncertainty * math.sqrt(share) for name, share in number.budget.items()
    }
    comparator = math.hypot(*(components[name] for name in ("difference", "random", "systematic")))
    assert components["standard"] == printed("25")
    assert comparator == printed("9.7")
    assert components["alpha_difference"] == printed("2.9")
    assert components["warmth"] == printed("16.6")
    assert not {"alpha", "temperature", "cycle"} & components.keys()


# JCGM 101:2008, 9.4.2.2 and table 6: δY = X₁² + X₂² with u = 0.005 for both, by the GUM's first-order law (1e-6); the
# law gives nothing at zero. From memory.
@pytest.mark.parametrize("estimate, loss, uncertainty", [(0.0, 0, None), (0.010, 100, 100), (0.050, 2500, 500)])
def test_comparison_loss_of_jcgm_101(estimate, loss, uncertainty):
    def comparison_loss(real, imaginary):
        """Loss of a comparison of power meters"""
        return real**2 + imaginary**2

    number = propagated(comparison_loss, real=(estimate, 0.005), imaginary=(0.0, 0.005))
    assert number.value * 1e6 == pytest.approx(loss, abs=1e-9)
    if uncertainty is None:
        assert number.standard_uncertainty is None
    else:
        assert number.standard_uncertainty * 1e6 == pytest.approx(uncertainty, rel=1e-8)


def test_mass_calibration_of_jcgm_101():
    # JCGM 101:2008, 9.3, tables 4 and 5: first order gives 1.2340 mg and u = 0.0539 mg (from memory). The conventional
    # mass, in mg, of a weight in air whose density cancels at first order.
    def deviation(reference, added, air, weight, standard):
        """Deviation from the nominal mass"""
        return (reference + added) * (1 + (air - 1.2) * (1 / weight - 1 / standard)) - 100000

    number = propagated(
        deviation,
        reference=(100000.000, 0.050),
        added=(1.234, 0.020),
        air=(1.20, rectangular(0.10)),
        weight=(8000.0, rectangular(1000.0)),
        standard=(8000.0, rectangular(50.0)),
    )
    assert number.value == printed("1.2340")
    assert number.standard_uncertainty == printed("0.0539")


# ----------------------------------------------------------------------------------------------------- EA-4/02 M


def test_weight_of_ea_4_02():
    # EA-4/02, S2: calibration of a weight of 10 kg. Values, uncertainties and shares read in a published evaluation.
    def weight(standard, drift, difference, eccentricity, buoyancy):
        """Conventional mass of a weight in grams"""
        return standard + drift + difference + eccentricity + buoyancy

    number = propagated(
        weight,
        standard=(10000.005, 0.0225),
        drift=(0.0, rectangular(15e-3)),
        difference=(0.020, 0.0142),
        eccentricity=(0.0, rectangular(10e-3)),
        buoyancy=(0.0, rectangular(10e-3)),
    )
    assert number.value == printed("10000.025")
    assert number.standard_uncertainty == printed("0.0291")
    percent = {name: 100 * share for name, share in number.budget.items()}
    expected = {"standard": "59.6", "difference": "23.7", "drift": "8.8", "eccentricity": "3.9", "buoyancy": "3.9"}
    # 0.0142 is a printed input: half a unit of it moves its share, and the others' by what it takes from them.
    rounding = 2 * (0.00005 / 0.0142) * 0.237
    for name, share in expected.items():
        assert percent[name] == printed(share, inputs=2 * (0.00005 / 0.0142) if name == "difference" else rounding)
    assert next(iter(number.budget)) == "standard"


def test_resistor_of_ea_4_02():
    # EA-4/02, S3: a 10 kΩ standard resistor, R_X = (R_S + δR_D + δR_TS) r_C r − δR_TX. Result read in a published
    # evaluation: 10 000.1780 Ω and u = 8.328 mΩ; inputs beyond R_S from memory.
    def resistance(standard, drift, warm_standard, coupling, ratio, warm_unknown):
        """Resistance of the unknown in ohms"""
        return (standard + drift + warm_standard) * coupling * ratio - warm_unknown

    number = propagated(
        resistance,
        standard=(10000.053, 2.5e-3),
        drift=(0.020, rectangular(10e-3)),
        warm_standard=(0.0, rectangular(2.75e-3)),
        coupling=(1.0, 1e-6 / math.sqrt(6)),
        ratio=(1.0000105, 0.07e-6),
        warm_unknown=(0.0, rectangular(5.5e-3)),
    )
    assert number.value == printed("10000.1780")
    assert number.standard_uncertainty * 1e3 == printed("8.33")


def test_one_input_on_two_paths_counts_once():
    # JCGM 100:2008, 5.2.2 and its note: fully correlated contributions add linearly. x − x is known exactly.
    def nothing(length):
        """Difference of a length and itself"""
        return length - length

    def twice(length):
        """A length laid out twice"""
        return length + length

    assert propagated(nothing, length=(1.0, 0.1)).standard_uncertainty is None
    assert propagated(twice, length=(1.0, 0.1)).standard_uncertainty == pytest.approx(0.2, rel=1e-9)


# --------------------------------------------------------------------------------------- an independent route


@dataclass
class Route:
    """Rows evaluated anew for other values of their inputs, outside the program's own propagation.

    Each input is an independent number of the package `uncertainties`, which propagates through `wrap` with
    derivatives of its own: five points each, with another step.
    """

    plan: Plan
    batch: Batch
    moved: dict[tuple, dict[str, np.ndarray]] = field(default_factory=dict)

    def __post_init__(self):
        self.nominal = evaluate(self.plan, self.batch.values)
        # Counts and lists carry no uncertainty, and no number rests on one.
        definitions = self.plan.definitions.items()
        self.smooth = {id for id, d in definitions if d.carries_uncertainty and d.form == "number"}

    def values(self, shifts: tuple[float, ...]) -> dict[str, np.ndarray]:
        """Everything that the plan defines, with the uncertain inputs off by multiples of STEP of themselves."""
        if shifts not in self.moved:
            given = {name: value.copy() for name, value in self.batch.values.items()}
            for (name, entry), shift in zip(self.batch.uncertain, shifts, strict=True):
                given[name][0, :, entry] *= 1 + shift * STEP
            self.moved[shifts] = evaluate(self.plan, {**self.nominal, **given}, only=self.smooth)
        return self.moved[shifts]

    def number(self, id: str, row: int, entry: int):
        """One entry of a quantity with the package's uncertainty."""
        groups = list(self._inputs(row).values())
        spread = [self._relative(row, *group[0]) / STEP for group in groups]
        slopes = [self._slope(id, row, entry, group) for group in groups]
        return wrap(lambda *_: self._at(id, row, entry, (), 0.0), slopes)(*(ufloat(0.0, u) for u in spread))

    def _inputs(self, row: int) -> dict[str, list[tuple[str, int]]]:
        """Uncertain inputs of a row: one that quantities read under several names is one input."""
        groups: dict[str, list[tuple[str, int]]] = {}
        for name, k in self.batch.uncertain:
            if self.batch.uncertainties[name][row, k] > 0:
                groups.setdefault(self.batch.ids[name][row][k], []).append((name, k))
        return groups

    def _slope(self, id: str, row: int, entry: int, group):
        def at(multiple):
            return self._at(id, row, entry, group, multiple)

        return lambda *_: (8 * (at(1.0) - at(-1.0)) - (at(2.0) - at(-2.0))) / 12

    def _at(self, id: str, row: int, entry: int, group, multiple: float) -> float:
        shifts = tuple(multiple if pair in group else 0.0 for pair in self.batch.uncertain)
        found = self.values(shifts)[id]
        return float(np.broadcast_to(found, (1, len(self.batch.records), *found.shape[2:]))[0, row, entry])

    def _relative(self, row: int, name: str, k: int) -> float:
        return self.batch.uncertainties[name][row, k] / abs(self.batch.values[name][0, row, k])


@pytest.fixture(scope="module")
def routes(handbook):
    """(scope, dimension) → the program's propagation beside the other route, for four materials and their films."""
    chosen = [handbook[slug].record for slug in ("copper", "zinc", "silicon-n-phosphorus")]
    well = [handbook["gallium-arsenide-quantum-well"].record]
    plans = handbook.registry.plans
    batches = {
        ("material", 3): material_batch(chosen, handbook.imprint),
        ("material", 2): material_batch(well, handbook.imprint),
        ("specimen", 3): specimen_batch(chosen, handbook.imprint),
    }
    return {kind: (propagate(plans[kind], batch), Route(plans[kind], batch)) for kind, batch in batches.items()}


@pytest.mark.parametrize("kind, fewest", [(("material", 3), 250), (("material", 2), 20), (("specimen", 3), 15)])
def test_every_uncertainty_by_an_independent_route(routes, kind, fewest):
    """Every number that carries an uncertainty, to 1e-5 of it."""
    derived, route = routes[kind]
    compared = 0
    for id, definition in derived.plan.definitions.items():
        if not definition.published or definition.form != "number" or not definition.carries_uncertainty:
            continue
        if definition.kinked:
            # Takes differences over the width of the uncertainty, held in tests/test_uncertainty.py.
            continue
        for row in range(len(derived.batch.records)):
            for entry in range(derived.entries(id)):
                ours = derived.number(id, row, entry)
                if ours is None or ours.standard_uncertainty is None:
                    continue
                theirs = route.number(id, row, entry)
                assert theirs.nominal_value == pytest.approx(ours.value, rel=1e-12)
                where = f"{id}[{entry}] of {derived.batch.records[row].slug}"
                assert theirs.std_dev == pytest.approx(ours.standard_uncertainty, rel=1e-5), where
                compared += 1
    assert compared >= fewest
