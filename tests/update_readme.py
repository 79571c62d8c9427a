"""Write the generated parts of the README: the list of fields and the picture of page one.

Run: .venv/bin/python tests/update_readme.py (needs pdftoppm of poppler for the picture).
"""

import subprocess
import tempfile
from pathlib import Path

from triage.assessment import assess
from triage.documents.field_guide import field_guide
from triage.documents.incident_report import write_report
from triage.record import load
from triage.site import load as load_site

ROOT = Path(__file__).resolve().parent.parent
START, END = "<!-- fields: made by `triage fields` -->\n", "<!-- end of fields -->"
CASE = ROOT / "examples" / "incidents" / "instrument-cart-four-shocked.yaml"


def main() -> None:
    """Rewrite both."""
    readme = ROOT / "README.md"
    text = readme.read_text("utf-8")
    head, rest = text.split(START)
    readme.write_text(f"{head}{START}\n{field_guide()}\n{END}{rest.split(END)[1]}", "utf-8")
    with tempfile.TemporaryDirectory() as folder:
        pdf = Path(folder) / "page.pdf"
        write_report(assess(load(CASE), load_site(ROOT / "examples" / "site.yaml")), pdf)
        target = ROOT / "examples" / "pictures" / "page-one"
        target.parent.mkdir(exist_ok=True)
        subprocess.run(["pdftoppm", "-r", "80", "-f", "1", "-l", "1", "-png", "-singlefile",
                        str(pdf), str(target)], check=True)  # fmt: skip


if __name__ == "__main__":
    main()
