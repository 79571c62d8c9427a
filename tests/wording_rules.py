"""Rules for printed words, as functions that a test can hold against any text."""

import re

_IMPERATIVE = re.compile(
    r"(?<![\w-])(isolate|switch (?:it |them |the \w+ )?off|turn (?:it |the \w+ )?off|unplug|withdraw"
    r"|disconnect|power (?:it |the \w+ )?(?:off|down)|de-?energi[sz]e"
    r"|pull (?:out )?(?:the|its|that) plug|take (?:it |the \w+ )?out of use)(?![\w-]|\s+nothing)",
    re.IGNORECASE,
)
_CONDITION = re.compile(
    r"\b(if|when|once|only|after|before|unless|until|nobody|agrees?|clinician|transfer|not|never)\b",
    re.IGNORECASE,
)
_LEADS_IN = re.compile(r"(?:^|[.:;!?]\s+|[,]\s+|\b(?:then|and|please|now)\s+)$", re.IGNORECASE)
_SENTENCE = re.compile(r"(?<=[.!?])\s+")


def power_off_imperatives(text: str) -> list[str]:
    """Sentences that bid somebody to cut power or take away without a condition before it.

    A verb counts as an imperative where it opens the sentence or a clause of it. A condition, or a
    word that puts it off or forbids it, must come before the verb in the same sentence.
    """
    found = []
    for sentence in _SENTENCE.split(" ".join(text.split())):
        for verb in _IMPERATIVE.finditer(sentence):
            ahead = sentence[: verb.start()]
            bids = _LEADS_IN.search(ahead) is not None or not ahead.strip()
            if bids and not _CONDITION.search(ahead):
                found.append(sentence)
                break
    return found
