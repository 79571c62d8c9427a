"""Small published networks with several parents, through the plain core and by brute force.

The core knows exclusive causes with independent findings and no nets. Such a net still goes through
it when every joint state of the nodes that were not observed is one cause, weighed by the tables, and
every observed node is one finding. Beside it stands enumeration of the whole joint distribution.
"""

import itertools
import math
from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Any

import pytest
import yaml

from triage.diagnosis import Case, evaluate

PUBLISHED = yaml.safe_load(
    (Path(__file__).parent / "published" / "bayes_networks.yaml").read_text(encoding="utf-8")
)
NETS: dict[str, dict[str, Any]] = {net["id"]: net for net in PUBLISHED["networks"]}
QUERIES = [(net, query) for net in NETS.values() for query in net["queries"]]
World = Mapping[str, bool]


def nodes_of(net: dict[str, Any]) -> dict[str, dict[str, Any]]:
    return NETS[net.get("same_as", net["id"])]["nodes"]


def chance(nodes: dict[str, dict[str, Any]], name: str, world: World) -> float:
    """P(a node is as in this world | its parents there)."""
    key = "".join("t" if world[parent] else "f" for parent in nodes[name].get("parents", ()))
    true = nodes[name]["p"][key]
    return true if world[name] else 1 - true


def worlds(nodes: dict[str, dict[str, Any]], given: World) -> Iterator[dict[str, bool]]:
    """Every joint state that agrees with what was observed."""
    free = [name for name in nodes if name not in given]
    for states in itertools.product((True, False), repeat=len(free)):
        yield dict(given) | dict(zip(free, states, strict=True))


def by_enumeration(nodes: dict[str, dict[str, Any]], given: World, asked: str) -> float:
    total = agreeing = 0.0
    for world in worlds(nodes, given):
        p = math.prod(chance(nodes, name, world) for name in nodes)
        total += p
        agreeing += p if world[asked] else 0.0
    return agreeing / total


def by_the_core(nodes: dict[str, dict[str, Any]], given: World, asked: str) -> float:
    states = list(worlds(nodes, given))
    hidden = [name for name in nodes if name not in given]
    priors = [math.prod(chance(nodes, name, world) for name in hidden) for world in states]
    rows = {
        name: tuple(_log(chance(nodes, name, world)) for world in states) for name in given
    }  # fmt: skip
    nothing = (0.0,) * len(states)
    whole = tuple(p / sum(priors) for p in priors)
    found = evaluate(Case(whole, nothing, {}, rows, {}, frozenset(), nothing))
    return math.fsum(p for p, world in zip(found, states, strict=True) if world[asked])


def _log(p: float) -> float:
    return math.log(p) if p > 0 else -math.inf


def test_every_table_and_every_posterior_says_how_it_is_known():
    for net in [*NETS.values(), PUBLISHED["circuit"]]:
        assert net["source"]
        assert {net["tables"], net["posteriors"]} <= {"published", "memory", "derived"}


@pytest.mark.parametrize(("net", "query"), QUERIES, ids=lambda part: part.get("id", ""))
@pytest.mark.parametrize("way", [by_the_core, by_enumeration])
def test_published_networks_come_out(way, net, query):
    """Source beside each net of tests/published/bayes_networks.yaml."""
    for asked, wanted in query["of"].items():
        found = way(nodes_of(net), query["given"], asked)
        assert found == pytest.approx(wanted, abs=query["within"]), asked


@pytest.mark.parametrize(("net", "query"), QUERIES, ids=lambda part: part.get("id", ""))
def test_core_and_enumeration_agree_on_every_node(net, query):
    nodes = nodes_of(net)
    for asked in set(nodes) - set(query["given"]):
        core = by_the_core(nodes, query["given"], asked)
        assert core == pytest.approx(by_enumeration(nodes, query["given"], asked), abs=1e-12)


def test_the_chance_of_what_was_observed_comes_out_too():
    """P(asia, dyspnoea) = 0.00450138 in the chest-clinic net, by enumeration of its tables."""
    nodes = nodes_of(NETS["chest_clinic"])
    given = {"asia": True, "dyspnoea": True}
    found = sum(math.prod(chance(nodes, n, world) for n in nodes) for world in worlds(nodes, given))
    assert found == pytest.approx(0.00450138, abs=5.1e-9)


# the circuit with a wrong output

CIRCUIT = PUBLISHED["circuit"]
PARTS = ("m1", "m2", "m3", "a1", "a2")


def explains(faulty: frozenset[str]) -> dict[str, float] | None:
    """Values at x, y, z that make the good parts agree with what was seen; None where none do."""
    i, seen = CIRCUIT["inputs"], CIRCUIT["seen"]
    good = {"x": i["a"] * i["c"], "y": i["b"] * i["d"], "z": i["c"] * i["e"]}
    fixed = {k: v for k, v in good.items() if f"m{'xyz'.index(k) + 1}" not in faulty}
    sums = [s for s, part in ((("x", "y", "f"), "a1"), (("y", "z", "g"), "a2"))
            if part not in faulty]  # fmt: skip
    for _ in sums:
        for one, two, out in sums:
            for known, other in ((one, two), (two, one)):
                if known in fixed and other not in fixed:
                    fixed[other] = seen[out] - fixed[known]
    fits = all(fixed[one] + fixed[two] == seen[out] for one, two, out in sums
               if one in fixed and two in fixed)  # fmt: skip
    return fixed if fits else None


def minimal_diagnoses() -> list[frozenset[str]]:
    found: list[frozenset[str]] = []
    for size in range(len(PARTS) + 1):
        for each in map(frozenset, itertools.combinations(PARTS, size)):
            if not any(smaller <= each for smaller in found) and explains(each) is not None:
                found.append(each)
    return found


def circuit_posterior() -> dict[str, float]:
    diagnoses, p = minimal_diagnoses(), CIRCUIT["fault"]
    priors = [p ** len(d) * (1 - p) ** (len(PARTS) - len(d)) for d in diagnoses]
    nothing = (0.0,) * len(diagnoses)
    whole = tuple(each / sum(priors) for each in priors)
    found = evaluate(Case(whole, nothing, {}, {}, {}, frozenset(), nothing))
    return {" ".join(sorted(d)): each for d, each in zip(diagnoses, found, strict=True)}


def test_the_minimal_diagnoses_of_the_adder_circuit_and_their_chances_come_out():
    found = circuit_posterior()
    assert found.keys() == CIRCUIT["diagnoses"].keys()
    assert found == pytest.approx(CIRCUIT["diagnoses"], abs=CIRCUIT["within"])


def test_the_best_probe_of_the_adder_circuit_is_the_one_that_parts_its_two_leading_faults():
    """Least expected entropy = most different predictions weighed; de Kleer and Williams 1987."""
    told = {}
    for probe in "xyz":
        shares: dict[float, float] = {}
        for diagnosis, p in circuit_posterior().items():
            value = (explains(frozenset(diagnosis.split())) or {})[probe]
            shares[value] = shares.get(value, 0.0) + p
        told[probe] = -sum(p * math.log2(p) for p in shares.values())
    assert max(told, key=lambda probe: told[probe]) == CIRCUIT["best_probe"]
    assert told["x"] == pytest.approx(1.0, abs=1e-3)
