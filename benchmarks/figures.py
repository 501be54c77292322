"""How long a figure takes: stamped into a frame that stands, against drawn afresh by matplotlib; and its bytes.

Run it as `python benchmarks/figures.py [materials folder]`; without a folder it uses the sample of the tests.
The curves are worked out beforehand: this measures drawing, not physics.
"""

from __future__ import annotations

import statistics
import sys
import time
from importlib import import_module
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
# In place of this folder, where this very file would hide the tests of the same name.
sys.path[:1] = [str(ROOT), str(ROOT / "tests")]

ROUNDS = 200


def main(arguments: list[str]) -> None:
    """Print one line a kind of figure, and the ratio over all."""
    from figures import afresh

    from sheetgen.figures.stamp import stamp

    plots = list(_plots(arguments))
    print(f"{'figure':20} {'stamped':>11} {'afresh':>11} {'ratio':>7} {'SVG':>9} {'CSV':>9}")
    totals = [0.0, 0.0]
    for plot in plots:
        figure = stamp(plot)
        stamped, drawn = _milliseconds(stamp, plot, ROUNDS), _milliseconds(afresh.svg, plot, 3)
        totals = [totals[0] + stamped, totals[1] + drawn]
        print(
            f"{plot.id:20} {stamped:8.3f} ms {drawn:8.1f} ms {drawn / stamped:7.0f} "
            f"{len(figure.svg) / 1000:6.1f} kB {len(figure.csv) / 1000:6.1f} kB"
        )
    count = len(plots)
    ratio = totals[1] / totals[0]
    print(f"{'mean':20} {totals[0] / count:8.3f} ms {totals[1] / count:8.1f} ms {ratio:7.0f}")


def _plots(arguments: list[str]):
    """The plots of copper, without those that it does not have."""
    from sheetgen.figures import MODULES
    from sheetgen.figures.subject import Subject

    if arguments:
        from sheetgen.handbook import Handbook

        handbook = Handbook.load(Path(arguments[0]))
        subject = Subject(next(s for s in handbook.sheets if s.record.slug == "copper"), handbook)
    else:
        from figures import sample

        subject = sample.subject("copper")
    for name in MODULES:
        module = import_module(f"sheetgen.figures.{name}")
        if module.draw(subject) is not None:
            yield module.plot(subject)


def _milliseconds(draw, plot, rounds: int) -> float:
    """Median processor time of one drawing."""
    draw(plot)
    times = []
    for _ in range(rounds):
        start = time.process_time()
        draw(plot)
        times.append(time.process_time() - start)
    return statistics.median(times) * 1000


if __name__ == "__main__":
    main(sys.argv[1:])
