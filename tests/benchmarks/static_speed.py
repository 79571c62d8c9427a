"""Static exposures a second on one core: one story at full depth, and a batch over materials.

Run: .venv/bin/python tests/benchmarks/static_speed.py
Exits 1 when one story takes more than 1.5 ms or the batch makes fewer than 2000 a second.
"""

import sys
import time
from itertools import product

from triage.conditions import Touch
from triage.materials import load
from triage.physics.humidity import Humidity
from triage.static_exposure import Measured, StaticStory, static_exposure

MOST_SECONDS, LEAST_RATE = 1.5e-3, 2000
BATCH_ORDER = 5
AIR = tuple(Humidity(rh / 100, 0.03) for rh in (15, 25, 35, 45, 55, 65))


def told(cause: str, floor: str, shoe: str, air: Humidity, **other: object) -> StaticStory:
    """One story; steps and pause not known."""
    values = {"steps": None, "pause": 0.0, "object_kind": None} | other
    return StaticStory(cause, floor, shoe, "rubber", air, touch=Touch(), readings=Measured(),
                       **values)  # fmt: skip


SINGLE = {
    "walking, plateau": told("person_walking", "vinyl", "ordinary", AIR[1]),
    "walking, 20 steps, 1 s": told("person_walking", "vinyl", "ordinary", AIR[1], steps=20,
                                   pause=1.0),
    "walking, earthing": told("person_walking", "dissipative", "esd", AIR[1], pause=1.0),
    "rising, 1 s": told("person_rising", "vinyl", "ordinary", AIR[1], pause=1.0),
    "charged cart, 1 s": told("charged_object", "vinyl", "ordinary", AIR[1], pause=1.0,
                              object_kind="cart"),
}  # fmt: skip


def seconds(stories: list[StaticStory], order: int | None, rounds: int) -> float:
    """CPU seconds for one story, the best of several rounds, nothing cached."""
    best = float("inf")
    for _ in range(rounds):
        static_exposure.cache_clear()
        start = time.process_time()
        for each in stories:
            static_exposure(each, order)
        best = min(best, (time.process_time() - start) / len(stories))
    return best


def main() -> int:
    """Print the figures; 1 when one misses what is promised."""
    over = False
    for name, each in SINGLE.items():
        used = seconds([each], None, 40)
        over = over or used > MOST_SECONDS
        print(f"{name:24} {used * 1e3:5.2f} ms (at most {MOST_SECONDS * 1e3:.1f})")
    m = load()
    grid = [told("person_walking", *each) for each in product(m.floors, m.footwear, AIR)]
    rate = 1 / seconds(grid, BATCH_ORDER, 5)
    print(f"{'batch, floors by shoes':24} {rate:5.0f} a second (at least {LEAST_RATE}), "
          f"{len(grid)} stories")  # fmt: skip
    return int(over or rate < LEAST_RATE)


if __name__ == "__main__":
    sys.exit(main())
