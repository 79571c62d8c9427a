"""What one posterior costs beside two libraries for Bayesian networks, in one run on one core.

The same plain network and the same answers for all; the libraries keep their network built, here the
case is built anew each time. Run: .venv/bin/python tests/benchmarks/posterior_speed.py (with the
library wanted installed: pgmpy, pyagrum).
"""

import random
import sys
import time
from collections.abc import Callable
from pathlib import Path
from statistics import median

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from importlib.util import find_spec

from plain_core import LIBRARIES, network, plain_knowledge, random_case

import triage.diagnosis
from triage.diagnosis import build_case, evaluate, prior
from triage.site import no_site

CASES, ROUNDS = 100, 5


def seconds(act: Callable[[], object]) -> float:
    """CPU seconds for one case, median of the rounds."""
    found = []
    for _ in range(ROUNDS):
        start = time.process_time()
        act()
        found.append((time.process_time() - start) / CASES)
    return median(found)


def main() -> None:
    """Print the time of one posterior here and in each library that is installed."""
    plain = plain_knowledge()
    triage.diagnosis.knowledge = lambda: plain
    priors = prior("ward", "earthed", no_site())
    cases = [random_case(random.Random(seed), plain) for seed in range(CASES)]
    asked = [{o.finding.id: o.state for o in case} for case in cases]
    here = seconds(lambda: [evaluate(build_case(priors, case, {})) for case in cases])
    print(f"here: {here * 1e6:.0f} us for one posterior over {len(priors)} causes")
    for library in LIBRARIES:
        if find_spec(library) is None:
            print(f"{library}: not installed")
            continue
        ask = network(library, priors)
        there = seconds(lambda ask=ask: [ask(each) for each in asked])
        print(f"{library}: {there * 1e6:.0f} us, {there / here:.0f} times as long")


if __name__ == "__main__":
    main()
