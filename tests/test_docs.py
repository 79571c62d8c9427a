"""The guide for users stays true: fields, commands, links."""

import re
import subprocess
import sys
from pathlib import Path

import pytest

from triage.cli import app
from triage.documents.field_guide import blank_record, field_guide
from triage.record import loads

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text("utf-8")
COMMANDS = [c.name or c.callback.__name__ for c in app.registered_commands if c.callback]


def test_the_field_list_of_the_readme_is_the_one_the_table_gives() -> None:
    start, end = "<!-- fields: made by `triage fields` -->\n", "<!-- end of fields -->"
    between = README.split(start)[1].split(end)[0]

    assert between.strip() == field_guide().strip()


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_stands_in_the_readme_and_says_what_it_does(command: str) -> None:
    text = next(c.callback.__doc__ for c in app.registered_commands
                if c.callback and (c.name or c.callback.__name__) == command)  # fmt: skip

    assert f"`triage {command}" in README
    assert text and text.endswith(".")


@pytest.mark.parametrize("target", re.findall(r"\]\(([^)#:]+)\)", README))
def test_every_link_of_the_readme_leads_somewhere(target: str) -> None:
    assert (ROOT / target).exists()


def test_the_two_commands_of_the_readme_are_scripts_that_stand_there() -> None:
    named = re.findall(r"^sh (\S+)", README, re.MULTILINE)

    assert named == ["examples/run.sh", "tests/run.sh"]
    assert all((ROOT / name).is_file() for name in named)


def test_the_commands_of_the_first_case_run_as_printed(tmp_path: Path) -> None:
    lines = [line for line in README.splitlines() if line.startswith(".venv/bin/triage ")]

    assert len(lines) == 3
    for line in lines:
        words = line.replace("cart.pdf", str(tmp_path / "cart.pdf")).split()[1:]
        done = subprocess.run([sys.executable, "-m", "triage", *words], cwd=ROOT,
                              capture_output=True, text=True, timeout=120)  # fmt: skip
        assert done.returncode in (0, 3), done.stderr


def test_an_empty_record_is_a_readable_draft() -> None:
    assert loads(blank_record("0123456789abcdef" * 2)).incident.items == ()
