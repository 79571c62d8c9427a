"""Typed text made safe to look at: what could act, instead of being read, is shown as its code."""

import re
import unicodedata

MARKS_IN_A_ROW = 3
"""Combining marks left on one letter; judgement: no orthography needs more, a stack of forty
paints over the lines above."""
_PILE = re.compile(f"(?<=[\u0300-\u036f]{{{MARKS_IN_A_ROW}}})[\u0300-\u036f]+")
_QUIET = re.compile("[\n\t\u00a0\u2009\u202f]")  # common, harmless, yet not "printable"
_ACTS = frozenset({"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp"})
_ALLOWED = frozenset("\n\t\u200c\u200d")  # the joiners shape Persian and Indic words


def visible(typed: str) -> str:
    """Typed text with everything that could act, instead of being read, shown as its code.

    Args:
        typed: any text; line ends of any system.

    Returns:
        The text with control, direction and private characters as [U+202E], and a pile of
        combining marks cut after three, its first cut mark and their number in its place.

    >>> visible("no fault\u202e")
    'no fault[U+202E]'
    """
    text = _PILE.sub(_pile, typed.replace("\r\n", "\n"))
    if _QUIET.sub("", text).isprintable():
        return text
    return "".join(code(each) if _may_act(each) else each for each in text)


def _pile(found: re.Match[str]) -> str:
    return f"{code(found[0][0])}×{len(found[0])}"


def _may_act(character: str) -> bool:
    return character not in _ALLOWED and unicodedata.category(character) in _ACTS


def code(character: str) -> str:
    """A character as its code, such as [U+202E]."""
    return f"[U+{ord(character):04X}]"
