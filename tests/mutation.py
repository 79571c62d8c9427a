"""Mutation testing: break the program in one place at a time and see whether its tests notice.

Run: .venv/bin/python tests/mutation.py [modules] [--sample 40] [--seed 1] [--jobs 1] [--near]
[--at 120,131]. Works on copies in a temporary folder. Prints each survivor with its line and the
share killed in every module; leaves with 1 when fewer than 95 % of a module's mutants were killed.
Sentences are not changed: what a text says is held by the tests of wording, not by these. Nor are
decorators and `strict=`, whose loss changes nothing while the program is right.
"""

import argparse
import ast
import os
import queue
import random
import re
import shutil
import subprocess
import sys
import tempfile
from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
from copy import deepcopy
from dataclasses import dataclass
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
NEAR = {  # module: test files that take seconds, the closest first
    "diagnosis": ("diagnosis", "bayes_networks", "assessment"),
    "disposition": ("disposition", "red_flags", "breakage", "assessment"),
    "red_flags": ("red_flags", "disposition"),
    "validity": ("validity", "as_left", "evidence", "disposition"),
    "care": ("care",),
}
FAR = {  # those that take minutes
    "diagnosis": ("full_form", "cases"),
    "disposition": ("fail_safe", "cases", "order_of_answers"),
    "red_flags": ("fail_safe", "cases"),
    "validity": ("fail_safe", "cases"),
    "care": ("order_of_answers", "cases"),
}
WANTED = 0.95
SECONDS = 400
_COMPARE: dict[type[ast.cmpop], tuple[type[ast.cmpop], ...]] = {
    ast.Lt: (ast.LtE, ast.GtE), ast.LtE: (ast.Lt, ast.Gt), ast.Gt: (ast.GtE, ast.LtE),
    ast.GtE: (ast.Gt, ast.Lt), ast.Eq: (ast.NotEq,), ast.NotEq: (ast.Eq,), ast.In: (ast.NotIn,),
    ast.NotIn: (ast.In,), ast.Is: (ast.IsNot,), ast.IsNot: (ast.Is,),
}  # fmt: skip
_ARITHMETIC: dict[type[ast.operator], type[ast.operator]] = {
    ast.Add: ast.Sub, ast.Sub: ast.Add, ast.Mult: ast.Div, ast.Div: ast.Mult,
    ast.BitOr: ast.BitAnd, ast.BitAnd: ast.BitOr,
}  # fmt: skip
_WORD = re.compile(r"[a-z][a-z0-9_]*")


@dataclass(frozen=True)
class Mutant:
    """One changed copy of a module: where, what, and its text."""

    line: int
    change: str
    text: str


def mutants(source: str) -> list[Mutant]:
    """Every mutant of a module, in the order of its lines."""
    tree = ast.parse(source)
    left = _left_alone(tree)
    found = []
    for number, node in enumerate(ast.walk(tree)):
        for change, new in _changes(node) if id(node) not in left else ():
            copy = deepcopy(tree)
            _put(copy, number, new)
            text = ast.unparse(ast.fix_missing_locations(copy))
            found.append(Mutant(getattr(node, "lineno", 0), change, text))
    return sorted(found, key=lambda each: (each.line, each.change))


def _left_alone(tree: ast.AST) -> set[int]:
    """Nodes of decorators and of `strict=`."""
    parts: list[ast.AST] = []
    for node in ast.walk(tree):
        if isinstance(node, ast.FunctionDef | ast.ClassDef):
            parts += node.decorator_list
        if isinstance(node, ast.keyword) and node.arg == "strict":
            parts.append(node)
    return {id(each) for part in parts for each in ast.walk(part)}


def _put(tree: ast.AST, number: int, new: ast.AST) -> None:
    """Replace the node of a number in the order of `ast.walk`."""
    old = list(ast.walk(tree))[number]
    for parent in ast.walk(tree):
        for field, value in ast.iter_fields(parent):
            if value is old:
                setattr(parent, field, new)
            elif isinstance(value, list):
                value[:] = [new if each is old else each for each in value]


def _changes(node: ast.AST) -> Iterator[tuple[str, ast.AST]]:
    if isinstance(node, ast.Compare):
        for new in _COMPARE[type(node.ops[0])]:
            changed = deepcopy(node)
            changed.ops[0] = new()
            yield f"{type(node.ops[0]).__name__} -> {new.__name__}", changed
    elif isinstance(node, ast.BoolOp):
        other = ast.Or() if isinstance(node.op, ast.And) else ast.And()
        yield f"{type(node.op).__name__} swapped", ast.BoolOp(other, deepcopy(node.values))
    elif isinstance(node, ast.BinOp) and type(node.op) in _ARITHMETIC:
        swapped = deepcopy(node)
        swapped.op = _ARITHMETIC[type(node.op)]()
        yield f"{type(node.op).__name__} swapped", swapped
    elif isinstance(node, ast.UnaryOp) and isinstance(node.op, ast.Not):
        yield "not dropped", deepcopy(node.operand)
    elif isinstance(node, ast.Constant):
        yield from _constants(node)
    elif isinstance(node, ast.Return) and node.value is not None:
        yield "returns None", ast.Return(ast.Constant(None))
    elif isinstance(node, ast.Expr) and isinstance(node.value, ast.Yield | ast.YieldFrom):
        yield "yield dropped", ast.Pass()
    elif isinstance(node, ast.If | ast.IfExp) and not isinstance(node.test, ast.Compare):
        negated = deepcopy(node)
        negated.test = ast.UnaryOp(ast.Not(), negated.test)
        yield "condition negated", negated


def _constants(node: ast.Constant) -> Iterator[tuple[str, ast.AST]]:
    value = node.value
    if isinstance(value, bool):
        yield f"{value} -> {not value}", ast.Constant(not value)
    elif isinstance(value, int | float):
        yield f"{value} -> {value * 1.5 + 1}", ast.Constant(type(value)(value * 1.5 + 1))
    elif isinstance(value, str) and _WORD.fullmatch(value):
        yield f"'{value}' misspelled", ast.Constant(f"{value}_")


class Bench:
    """Copies of the tree in which mutants are tried, one for each job."""

    def __init__(self, folder: Path, jobs: int, near: bool) -> None:
        self.near = near
        self.free: queue.Queue[Path] = queue.Queue()
        for number in range(jobs):
            copy = folder / str(number)
            for part in ("triage", "tests", "templates", "examples"):
                shutil.copytree(ROOT / part, copy / part, ignore=shutil.ignore_patterns("out"))
            shutil.copy(ROOT / "pyproject.toml", copy)
            self.free.put(copy)

    def survives(self, module: str, text: str) -> bool:
        """Whether the tests of a module pass with its text replaced."""
        copy = self.free.get()
        file = copy / "triage" / f"{module}.py"
        genuine = file.read_bytes()
        try:
            _write(file, text.encode())
            return _tests_pass(copy, NEAR[module] + (() if self.near else FAR[module]))
        finally:
            _write(file, genuine)
            self.free.put(copy)


def _write(file: Path, content: bytes) -> None:
    """Write a module and drop its compiled copy, which is told apart only by whole seconds."""
    file.write_bytes(content)
    for compiled in (file.parent / "__pycache__").glob(f"{file.stem}.*.pyc"):
        compiled.unlink()


def _tests_pass(copy: Path, names: tuple[str, ...]) -> bool:
    files = [f"tests/test_{name}.py" for name in names]
    command = [sys.executable, "-m", "pytest", "-q", "-x", "-p", "no:cacheprovider", *files]
    environment = os.environ | {"PYTHONPATH": str(copy)}
    try:
        done = subprocess.run(command, cwd=copy, env=environment, capture_output=True,
                              timeout=SECONDS, check=False)  # fmt: skip
    except subprocess.TimeoutExpired:
        return False
    return done.returncode == 0


def chosen(module: str, sample: int, seed: int, lines: frozenset[int]) -> list[Mutant]:
    """The mutants to try: those of the lines named, or a sample of all."""
    every = mutants((ROOT / "triage" / f"{module}.py").read_text(encoding="utf-8"))
    if lines:
        return [each for each in every if each.line in lines]
    picked = random.Random(f"{module} {seed}").sample(range(len(every)), min(sample, len(every)))
    return [every[number] for number in sorted(picked)]


def judge(bench: Bench, module: str, tried: list[Mutant], jobs: int) -> float:
    """Try the mutants of a module, print what survived, and give the share killed."""
    if not bench.survives(module, (ROOT / "triage" / f"{module}.py").read_text(encoding="utf-8")):
        raise SystemExit(f"{module}: its tests fail before anything was changed")
    killed = 0
    with ThreadPoolExecutor(jobs) as pool:
        lives = pool.map(lambda each: bench.survives(module, each.text), tried)
        for mutant, alive in zip(tried, lives, strict=True):
            killed += not alive
            if alive:
                print(f"{module}: survived: line {mutant.line}, {mutant.change}", flush=True)
    share = killed / max(len(tried), 1)
    print(f"{module}: {killed} of {len(tried)} killed ({share:.0%})", flush=True)
    return share


def main() -> None:
    """Try the modules named on the command line, or all of the table."""
    parser = argparse.ArgumentParser(description=(__doc__ or "").split("\n")[0])
    parser.add_argument("modules", nargs="*", default=list(NEAR), help=", ".join(NEAR))
    parser.add_argument("--sample", type=int, default=40)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--jobs", type=int, default=1)
    parser.add_argument("--at", default="", help="only these lines, separated by commas")
    parser.add_argument("--near", action="store_true", help="only the tests that take seconds")
    told = parser.parse_args()
    if unknown := set(told.modules) - set(NEAR):
        parser.error(f"no tests are named for {', '.join(sorted(unknown))}")
    lines = frozenset(int(each) for each in told.at.split(",") if each)
    with tempfile.TemporaryDirectory() as folder:
        bench = Bench(Path(folder), told.jobs, told.near)
        shares = [
            judge(bench, module, chosen(module, told.sample, told.seed, lines), told.jobs)
            for module in told.modules
        ]
    raise SystemExit(min(shares) < WANTED)


if __name__ == "__main__":
    main()
