"""Walks through the form without a terminal: given answers, or random ones."""

import random

from triage.clock import parse
from triage.errors import InvalidValue
from triage.form.change import Change, answer
from triage.form.choices import choices
from triage.form.flow import Step, is_answered, next_step, steps
from triage.form.state import State, begin
from triage.site import Site

NOW = parse("2026-12-01 10:00Z")
ODD = ("", "0", "99", "-1", "1 1 2", "yes and no", "né\u202e", "\ud800", "a" * 7000, "{{7*7}}", "'", '"',
       "- x", "#", "*a", "1e400 V", "<5 mA", "0,5 %", "24", "unknown", "2026-02-30", "07:61", "\x00",
       "another pump", "outlet1", "item1 item1", "null", "~")  # fmt: skip
TYPED = {
    "quantity": ("24 %", "230 V", "50 Hz", "1.9 mA", "180 kohm", "0.5 s", "0.12 A"),
    "time": ("now", "07:20", "yesterday 23:59", "2026-01-14 morning", "2026-01-14"),
    "count": ("0", "12", "5001"),
}


def fresh() -> State:
    return begin("0" * 32, NOW.text, "clinical engineer")


def walked(state: State, typed: list[str], site: Site) -> State:
    """The state after these answers, each to the question that is next."""
    for each in typed:
        step = next_step(state, site)
        assert step is not None, f"nothing is left to ask for {each}"
        state = answer(state, step, typed=each, site=site, present=NOW).state
    return state


def find(state: State, key: str, site: Site) -> Step:
    return next(each for each in steps(state, site) if each.key == key)


def again(state: State, key: str, typed: str, site: Site) -> Change:
    """One question answered once more, as after going back to it."""
    return answer(state, find(state, key, site), typed=typed, site=site, present=NOW)


def random_answer(rng: random.Random, state: State, step: Step, site: Site) -> str:
    """Something that a person might type, sensible more often than not."""
    among = [word for word, _ in choices(step, state, site)]
    if rng.random() < 0.1:
        return rng.choice(ODD)
    if rng.random() < 0.15:
        return "u"
    if step.kind == "another":
        return rng.choice(("yes", "no", "no"))
    if among:
        return " ".join(rng.sample(among, min(len(among), rng.choice((1, 1, 2)))))
    kind = step.question.field.kind if step.question else "text"
    return rng.choice(TYPED.get(kind, ("ward nurse", "0.08 ohm", "BM-1", *ODD)))


def random_walk(rng: random.Random, state: State, site: Site, length: int) -> State:
    """The state after random answers, some of them to questions answered before."""
    for _ in range(length):
        step = next_step(state, site)
        if step is None:
            return state
        if rng.random() < 0.2:
            step = rng.choice([s for s in steps(state, site) if is_answered(s, state)] or [step])
        try:
            state = answer(
                state, step, typed=random_answer(rng, state, step, site), site=site, present=NOW
            ).state
        except InvalidValue as error:
            assert str(error)
    return state
