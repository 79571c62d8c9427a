"""What a report costs, as ratios to the smallest document of the same profile and fonts.

CPU time (user and system) of whole processes, median of seven, taken in turn so that a busy moment
strikes all alike. Run: .venv/bin/python tests/benchmarks/report_cost.py
"""

import os
import subprocess
import sys
from io import BytesIO
from pathlib import Path
from statistics import median

from pypdf import PdfReader

HERE = Path(__file__).resolve().parent
ROUNDS = 7
PAGE_ONE_LIMIT = 1.5
EACH_FURTHER_PAGE = 0.12

SETUP = f"""
import sys
sys.path[:0] = [{str(HERE.parent.parent)!r}, {str(HERE.parent)!r}]
from triage.render import render_html, render_pdf
def pdf(html):
    content = render_pdf(html, title="t", attachments=[], identifier=b"0" * 16).content
    sys.stdout.buffer.write(content)
"""
SMALLEST = (
    SETUP
    + """
pdf('<html lang="en"><title>t</title><style>html{font-family:Report Sans}</style><p>Shock</p>')
"""
)
REPORT = (
    SETUP
    + """
from mock_report import context
pdf(render_html("incident_report.html", context({changes})))
"""
)


def cpu(code: str) -> tuple[float, int]:
    """CPU seconds of one child process, and the pages it made."""
    child = subprocess.Popen([sys.executable, "-c", code], stdout=subprocess.PIPE)
    assert child.stdout is not None
    content = child.stdout.read()
    _, status, used = os.wait4(child.pid, 0)
    if status:
        raise SystemExit("a render failed")
    return used.ru_utime + used.ru_stime, len(PdfReader(BytesIO(content)).pages)


def main() -> None:
    """Print both ratios and leave with 1 when one is over its limit."""
    jobs = {
        "smallest": SMALLEST,
        "page one": REPORT.format(changes="parts=[]"),
        "full": REPORT.format(changes=""),
    }
    times: dict[str, list[float]] = {name: [] for name in jobs}
    pages: dict[str, int] = {}
    for _ in range(ROUNDS):
        for name, code in jobs.items():
            seconds, pages[name] = cpu(code)
            times[name].append(seconds)
    floor = median(times["smallest"])
    ratios = {name: median(all_) / floor for name, all_ in times.items()}
    further = (ratios["full"] - ratios["page one"]) / (pages["full"] - 1)
    print(f"smallest document   {floor * 1000:.0f} ms CPU")
    print(f"page one alone      {ratios['page one']:.2f} (at most {PAGE_ONE_LIMIT})")
    print(f"full, {pages['full']} pages       {ratios['full']:.2f}")
    print(f"each further page   {further:.3f} (at most {EACH_FURTHER_PAGE})")
    sys.exit(ratios["page one"] > PAGE_ONE_LIMIT or further > EACH_FURTHER_PAGE)


if __name__ == "__main__":
    main()
