"""What the commands cost, as ratios to a floor in the same run.

CPU time (user and system) of whole processes, median of nine, taken in turn so that a busy moment
strikes all alike. Run: .venv/bin/python tests/benchmarks/speed.py
"""

import os
import subprocess
import sys
import tempfile
from pathlib import Path
from statistics import median

ROOT = Path(__file__).resolve().parent.parent.parent
CASE = ROOT / "examples" / "incidents" / "infusion-pump-snaps-each-touch.yaml"
SITE = ROOT / "examples" / "site.yaml"
ROUNDS = 9

TRIVIAL = """
import typer
app = typer.Typer(add_completion=False, rich_markup_mode=None, pretty_exceptions_enable=False)
@app.command()
def say(word: str = "x") -> None:
    "Say a word."
    typer.echo(word)
app()
"""
SMALLEST = """
from triage.render import render_pdf
html = '<html lang="en"><title>t</title><style>html{font-family:Report Sans}</style><p>Shock</p>'
print(len(render_pdf(html, title="t", attachments=[], identifier=b"0" * 16).content))
"""


def cpu(command: list[str]) -> float:
    """CPU seconds of one child process."""
    environment = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"}
    child = subprocess.Popen(command, stdout=subprocess.DEVNULL, cwd=ROOT, env=environment)
    _, status, used = os.wait4(child.pid, 0)
    if os.waitstatus_to_exitcode(status) not in (0, 3):
        raise SystemExit(f"failed: {' '.join(command)}")
    return used.ru_utime + used.ru_stime


def pages(pdf: Path) -> int:
    """Pages of a PDF."""
    from pypdf import PdfReader

    return len(PdfReader(pdf).pages)


def main() -> None:
    """Print every ratio beside what is promised, and leave with 1 when one is over."""
    python, triage = sys.executable, [sys.executable, "-m", "triage"]
    with tempfile.TemporaryDirectory() as folder:
        one, full = Path(folder) / "one.pdf", Path(folder) / "full.pdf"
        site = ["--site", str(SITE)]
        jobs = {
            "bare python": [python, "-c", "pass"],
            "trivial command": [python, "-c", TRIVIAL],
            "smallest document": [python, "-c", SMALLEST],
            "help": [*triage, "--help"],
            "assess": [*triage, "assess", str(CASE)],
            "page one": [*triage, "report", str(CASE), *site, "--page-one", "-o", str(one)],
            "report": [*triage, "report", str(CASE), *site, "-o", str(full)],
        }
        times: dict[str, list[float]] = {name: [] for name in jobs}
        for round_number in range(ROUNDS + 1):
            for name, command in jobs.items():
                used = cpu(command)
                if round_number:  # the first round fills caches and is not counted
                    times[name].append(used)
        count = pages(full)
    middle = {name: median(all_) for name, all_ in times.items()}
    promised = [
        ("help", "bare python", 8.0),
        ("assess", "trivial command", 3.0),
        ("page one", "smallest document", 1.5),
        ("report", "smallest document", 1.5 + 0.12 * count),
    ]
    for name in ("bare python", "trivial command", "smallest document"):
        print(f"{name:20} {middle[name] * 1000:6.0f} ms CPU")
    over = False
    for name, floor, most in promised:
        ratio = middle[name] / middle[floor]
        over = over or ratio > most
        extra = f", {count} pages" if name == "report" else ""
        print(f"{name:20} {ratio:6.2f} times {floor} (at most {most:.2f}){extra}")
    sys.exit(over)


if __name__ == "__main__":
    main()
