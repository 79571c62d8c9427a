"""Solutions a second of one person in a room, ours on one core and the ngspice program beside it.

Run: python tests/benchmarks/supply_circuit_speed.py
Exits 1 below 5000 single-person solutions a second.
"""

import shutil
import subprocess
import sys
import time

from triage.physics.supply_circuit import Device, Leak, Person, Room, Supply, touch
from triage.physics.touch_current import Mains

WANTED = 5000
MAINS = Mains(120, 60)
FILTER = Leak(None, 2.2e-9)
LINE = Leak(None, 44.2097e-9)
ISOLATED = Supply(mains=MAINS, isolated=True, leaks=(LINE, LINE))

CASES = {
    "one line of an isolated supply": (Room(supply=ISOLATED), Person("L1", "earth", 1000)),
    "open earth, earthed supply": (
        Room(
            supply=Supply(mains=MAINS, isolated=False),
            devices=(Device(name="pump", filters=(FILTER, FILTER), earth=None),),
        ),
        Person("pump", "earth", 1000),
    ),
    "ten devices, one line": (
        Room(
            supply=ISOLATED,
            devices=tuple(Device(name=f"d{k}", filters=(FILTER, FILTER)) for k in range(10)),
        ),
        Person("L1", "earth", 1000),
    ),
}

NETLIST = """* one line of an isolated supply
V1 L1 L2 AC 120
C1 L1 0 44.2097n
C2 L2 0 44.2097n
R1 L1 0 1000
.options rshunt=1e15
.control
ac lin 1 60 60
print mag(v(l1))
.endc
.end
"""


def rate(room: Room, person: Person, *, seconds: float = 1.0) -> float:
    """Solutions a second of processor time, so that a busy computer does not look like a slow one."""
    count, start = 0, time.process_time()
    while time.process_time() - start < seconds:
        for _ in range(100):
            touch(room, person)
        count += 100
    return count / (time.process_time() - start)


def main() -> int:
    """Print the rates; 1 when the slowest is below what is wanted."""
    rates = {name: rate(*case) for name, case in CASES.items()}
    for name, found in rates.items():
        print(f"{found:10.0f} /s  {name}")
    if program := shutil.which("ngspice"):
        start = time.perf_counter()
        # Batch mode without a .print line ends with status 1 although the circuit is solved.
        done = subprocess.run([program, "-b"], input=NETLIST, capture_output=True, text=True)
        once = time.perf_counter() - start
        result = next(line for line in done.stdout.splitlines() if line.startswith("mag"))
        print(f"{1 / once:10.0f} /s  ngspice, one process a circuit: {result} V over 1 kohm")
    return int(min(rates.values()) < WANTED)


if __name__ == "__main__":
    sys.exit(main())
