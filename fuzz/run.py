"""Fuzzes one target, guided by what the input covers: `python fuzz/run.py record --runs 50000 --seconds 600`.

Without a target all run, one after another. The last line of each is a JSON object: inputs, seconds, faults found. An
input that brings a fault to light is written to the folder given with --found.
"""

from __future__ import annotations

import argparse
import json
import re
import subprocess
import sys
import tempfile
import time
from pathlib import Path

HERE = Path(__file__).parent
NAMES = ("value", "unit", "formula", "record", "sheet", "imprint", "bibliography", "cif", "markdown")
LONGEST = {"value": 220, "unit": 80, "formula": 140, "markdown": 20_000, "cif": 3000, "imprint": 3000}
_EXECUTED = re.compile(r"stat::number_of_executed_units: (\d+)")


def main() -> int:
    """Run the targets named on the command line; the exit status is 1 where a fault was found."""
    options = argparse.ArgumentParser(description=__doc__.partition("\n")[0])
    options.add_argument("targets", nargs="*", default=NAMES, metavar="TARGET", help=", ".join(NAMES))
    options.add_argument("--runs", type=int, default=20_000, help="inputs to each target")
    options.add_argument("--seconds", type=int, default=300, help="the longest that a target may run")
    options.add_argument("--seed", type=int, default=1, help="of the random numbers")
    options.add_argument("--found", type=Path, default=Path("found"), help="the folder for inputs at fault")
    options.add_argument("--inside", action="store_true", help=argparse.SUPPRESS)
    given = options.parse_args()
    if given.inside:
        return fuzz(given.targets[0], given.runs, given.seconds, given.seed, given.found)
    return max(apart(name, given) for name in given.targets)


def apart(name: str, given: argparse.Namespace) -> int:
    """One target in a process of its own, since the fuzzer ends the process; prints the result."""
    given.found.mkdir(exist_ok=True)
    bounds = ["--runs", given.runs, "--seconds", given.seconds, "--seed", given.seed, "--found", given.found]
    command = [sys.executable, __file__, name, "--inside", *map(str, bounds)]
    began = time.monotonic()
    run = subprocess.run(command, capture_output=True, text=True, errors="replace", check=False)
    executed = _EXECUTED.findall(run.stderr)
    result = {
        "target": name,
        "inputs": int(executed[-1]) if executed else 0,
        "seconds": round(time.monotonic() - began),
        "fault": run.returncode != 0,
    }
    if run.returncode:
        (given.found / f"{name}.log").write_text(run.stderr[-20_000:], encoding="utf-8")
    print(json.dumps(result), flush=True)
    return int(run.returncode != 0)


def fuzz(name: str, runs: int, seconds: int, seed: int, found: Path) -> int:
    """Never returns: the fuzzer ends the process, with a status above 0 at a fault."""
    import atheris

    sys.path.insert(0, str(HERE))
    with atheris.instrument_imports(include=["sheetgen", "pybtex", "markdown"]):
        import seeds
        import targets
    target = targets.guarded(targets.TARGETS[name])
    for text in seeds.seeds()[name]:
        targets.TARGETS[name](text)  # what is loaded at the first use is no part of any input's time
    with tempfile.TemporaryDirectory() as corpus:
        for number, text in enumerate(seeds.seeds()[name]):
            (Path(corpus) / f"seed-{number}").write_bytes(text)
        words = Path(corpus).with_suffix(".words")
        words.write_text("\n".join(map(_quoted, seeds.WORDS)), encoding="utf-8")
        bounds = [f"-runs={runs}", f"-max_total_time={seconds}", f"-max_len={LONGEST.get(name, 6000)}"]
        more = [f"-seed={seed}", f"-dict={words}", f"-artifact_prefix={found}/{name}-", "-print_final_stats=1"]
        # The fuzzer's own clock counts the time of other processes, too: the target measures the processor's.
        limits = ["-timeout=60", "-rss_limit_mb=1024", "-len_control=20"]
        atheris.Setup([sys.argv[0], corpus, *bounds, *more, *limits], target)
        atheris.Fuzz()
    return 0


def _quoted(word: str) -> str:
    """A word as a dictionary of the fuzzer writes it."""
    safe = (chr(byte) if 32 <= byte < 127 and byte not in b'"\\' else f"\\x{byte:02x}" for byte in word.encode())
    return f'"{"".join(safe)}"'


if __name__ == "__main__":
    sys.exit(main())
