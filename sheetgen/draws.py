"""Draws: the distribution of each number by Monte Carlo, and whether first-order propagation agrees with it.

JCGM 101:2008: propagation of distributions (7), probabilistically symmetric 95 % coverage intervals (7.7), blocks of
draws that tell how well an end of an interval is known (7.9), and the validation of the first-order result (8).
Inputs are drawn from normal distributions (6.4.7: a best estimate with a standard uncertainty), by Sobol' points,
which fill the distribution more evenly than random ones: I. M. Sobol', USSR Comput. Math. Math. Phys. 7, 86 (1967).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import ceil, log2, sqrt

import numpy as np

from sheetgen.quantities.batch import Batch
from sheetgen.quantities.evaluate import evaluate
from sheetgen.uncertainty import Derived, Number

ENDS = (0.025, 0.975)
FEWEST = 2  # draws in a block
COVERAGE_FACTOR = 1.959963984540054  # of a normal distribution, for 95 %
DIGITS = 2
BLOCKS = 8
VALID, INVALID, UNRESOLVED = "valid", "not valid", "too few draws"


@dataclass(frozen=True)
class Interval:
    """95 % coverage interval of one number in SI, with mean and standard deviation of the draws.

    `first_order` says whether the first-order result is valid at two digits, not, or cannot be told from so few
    draws; `missing` is the share of draws for which the number does not exist.
    """

    low: float
    high: float
    mean: float
    standard_deviation: float
    first_order: str
    missing: float


def draw_intervals(derived: Derived, row: int, draws: int, seed: int) -> dict[str, list[Interval | None]]:
    """Quantity → interval of each entry, None where no uncertainty enters; one row of a batch.

    At least `draws` draws are made. Deterministic for a seed: each material has points of its own, so that the
    result does not depend on which others are drawn.
    """
    wanted = [id for id in derived.contributions if _uncertain(derived, id, row)]
    blocks: dict[str, list[np.ndarray]] = {id: [] for id in wanted}
    for values in _evaluated(derived, row, draws, seed, wanted):
        for id in wanted:
            blocks[id].append(values[id][:, 0, :])
    return {id: _intervals(derived, id, row, np.stack(blocks[id])) for id in wanted}


def validate(number: Number, low: float, high: float, noise: float) -> str:
    """JCGM 101, 8.2: whether both ends of the interval agree with y ± 1.96 u to half a unit of two digits of u.

    `noise` is how well the ends are known; where it decides, the answer is that there were too few draws.
    """
    uncertainty = number.standard_uncertainty
    expanded = COVERAGE_FACTOR * uncertainty
    off = max(abs(number.value - expanded - low), abs(number.value + expanded - high))
    rounded = int(f"{uncertainty:.{DIGITS - 1}e}".partition("e")[2])
    tolerance = 0.5 * 10.0 ** (rounded - (DIGITS - 1))
    if off + noise <= tolerance:
        return VALID
    return INVALID if off - noise > tolerance else UNRESOLVED


def _uncertain(derived: Derived, id: str, row: int) -> bool:
    if not derived.plan.definitions[id].drawn:
        return False
    return any(np.any(part[row] != 0) for part in derived.contributions[id].values())


def _evaluated(derived: Derived, row: int, draws: int, seed: int, wanted) -> Iterator[dict[str, np.ndarray]]:
    plan, batch = derived.plan, derived.batch
    nominal = {name: value[:, row : row + 1] for name, value in batch.values.items()}
    only = {id for id in plan.needed_for(wanted) if plan.definitions[id].form == "number"}
    exponent = max(ceil(log2(draws / BLOCKS)), 1)  # Sobol' points are balanced in powers of two
    for stream in np.random.SeedSequence([seed, *batch.records[row].slug.encode()]).spawn(BLOCKS):
        yield evaluate(plan, {**nominal, **_drawn(batch, row, exponent, stream)}, only=only)


def _drawn(batch: Batch, row: int, exponent: int, stream: np.random.SeedSequence) -> dict[str, np.ndarray]:
    """Draws of each uncertain input; entries that state the same value of the record move together."""
    from scipy.stats import norm, qmc

    uncertain = {name: np.flatnonzero(u[row] > 0) for name, u in batch.uncertainties.items()}
    ids = list(dict.fromkeys(batch.ids[name][row][k] for name, entries in uncertain.items() for k in entries))
    points = qmc.Sobol(max(len(ids), 1), rng=np.random.default_rng(stream)).random_base2(exponent)
    deviates = dict(zip(ids, norm.ppf(points).T, strict=False))
    drawn = {}
    for name, entries in uncertain.items():
        if len(entries):
            drawn[name] = np.repeat(batch.values[name][:, row : row + 1], 2**exponent, axis=0)
            for k in entries:
                drawn[name][:, 0, k] += batch.uncertainties[name][row, k] * deviates[batch.ids[name][row][k]]
    return drawn


def _intervals(derived: Derived, id: str, row: int, blocks: np.ndarray) -> list[Interval | None]:
    """Intervals from samples of shape (blocks, draws, entries)."""
    found: list[Interval | None] = []
    for entry in range(blocks.shape[2]):
        number = derived.number(id, row, entry)
        # Draws that leave the range of a definition do not exist.
        parts = [block[np.isfinite(block)] for block in blocks[:, :, entry]]
        if number is None or number.standard_uncertainty is None or min(map(len, parts)) < FEWEST:
            found.append(None)
            continue
        there = np.concatenate(parts)
        low, high = np.quantile(there, ENDS)
        spread = np.std([np.quantile(part, ENDS) for part in parts], axis=0, ddof=1).max()
        found.append(
            Interval(
                low=float(low),
                high=float(high),
                mean=float(there.mean()),
                standard_deviation=float(there.std(ddof=1)),
                first_order=validate(number, float(low), float(high), 2 * float(spread) / sqrt(BLOCKS)),
                missing=1 - len(there) / blocks[:, :, entry].size,
            )
        )
    return found
