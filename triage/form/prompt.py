"""A question on the screen: progress, question, choices or an example, and its help."""

from collections.abc import Iterator
from textwrap import wrap

from triage.check_table import check_kinds
from triage.clock import EXAMPLE as TIMES
from triage.form.choices import asked, called, choices
from triage.form.flow import Step, is_answered, progress, steps
from triage.form.lines import WIDTH
from triage.form.state import State, get
from triage.quantity import EXAMPLE
from triage.questions import Question
from triage.site import Site
from triage.visible import visible

_ONE_LOOK = 18
"""Choices beyond which a question leaves a screen of 24 rows; it is put once more below them."""


def question_lines(step: Step, state: State, site: Site) -> Iterator[str]:
    """Progress and question, then the choices or how the answer is typed."""
    about = _about(step, state)
    lead = f"{_count(step, state, site)} {about}{asked(step, state, site)}{_how(step, state)}"
    yield ""
    yield from wrap(visible(lead), WIDTH)
    if is_answered(step, state):
        yield from wrap(visible(f"now: {_answered(step, state)}"), WIDTH, initial_indent="  ")
    among = choices(step, state, site)
    if step.question is None:
        return
    if all(word == meaning for word, meaning in among) or step.question.options:
        yield from _in_a_row([meaning for _, meaning in among])
        return
    for number, (word, meaning) in enumerate(among, 1):
        said = word.replace("_", " ")
        text = meaning if meaning.startswith(said) else f"{said}: {meaning}"
        yield from wrap(
            visible(text), WIDTH, initial_indent=f"{number:4} ", subsequent_indent="     "
        )
    if len(among) > _ONE_LOOK:
        yield visible(step.question.ask)


def _count(step: Step, state: State, site: Site) -> str:
    """Where one stands: "3/8" in the first minute, then how many questions are left."""
    found = [each for each in steps(state, site) if each.section == step.section]
    if step.kind == "options":
        return f"{[each.key for each in found].index(step.key) + 1}/{len(found)}"
    done, total = progress(state, site)
    return f"({total - done} left)"


def _about(step: Step, state: State) -> str:
    """Which part of a list is meant, where there are several."""
    if step.kind != "field" or not step.section.part:
        return ""
    parts = state.tree[step.section.part]
    if len(parts) < 2:
        return ""
    part = parts[step.number]
    name, said = part.get("id", str(step.number + 1)), called(part) if "id" in part else ""
    return f"[{name}] " if said in ("", name, "unknown") else f"[{name}, {said}] "


def _answered(step: Step, state: State) -> str:
    """The answer that stands, where one went back to it."""
    if step.kind == "field":
        found = get(state.tree, step.key)
        return ", ".join(found) if isinstance(found, list) else str(found)
    if step.kind == "another":
        return "yes" if step.number < len(state.tree.get(step.section.part) or []) else "no"
    return state.marks[step.key]


def _in_a_row(words: list[str]) -> list[str]:
    joined = "  ".join(
        f"{n}\u00a0{each.replace(' ', chr(0xA0))}" for n, each in enumerate(words, 1)
    )
    lines = wrap(joined, WIDTH, initial_indent="  ", subsequent_indent="  ", break_long_words=False)
    return [each.replace("\u00a0", " ") for each in lines]


def _how(step: Step, state: State) -> str:
    """How the answer is typed, where that is not seen from the choices."""
    question = step.question
    if question is None:
        return " (yes or no)"
    if question.many or question.field.kind == "words":
        return " (several)"
    example = _example(question)
    if question.path == "checks[].value":
        kind = check_kinds().get(str(get(state.tree, f"checks[{step.number}].kind")))
        example = EXAMPLE[kind.quantity] if kind and kind.quantity else ""
    return f" (such as: {example})" if example else ""


def _example(question: Question) -> str:
    if question.example:
        return question.example
    if question.field.kind == "quantity":
        return EXAMPLE[question.field.quantity]
    return "now, 07:20, 2026-01-14" if question.field.kind == "time" else ""


def help_lines(step: Step) -> Iterator[str]:
    """Help for a question: what is meant, and how it is typed."""
    question = step.question
    if question is None:
        yield "Type yes or no."
        return
    if question.help:
        yield question.help
    if question.path and question.field.help != question.help:
        yield question.field.help
    if question.field.kind == "time":
        yield f"A time as exact as it is known: {TIMES}, now, 07:20 or yesterday 07:20."
    elif question.many or question.field.kind == "words":
        yield "Type numbers or words with blanks between, such as: 1 3"
    elif question.field.words or question.options:
        yield "Type a number of the list, a word of it or its beginning."
