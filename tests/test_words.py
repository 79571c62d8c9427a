import pytest

from triage import words
from triage.fields import UNKNOWN

LISTS = {
    name: each for name, each in vars(words).items() if isinstance(each, dict) and name.isupper()
}


@pytest.mark.parametrize("name", LISTS)
def test_every_word_has_an_order_and_a_meaning(name: str) -> None:
    for word, (order, meaning) in LISTS[name].items():
        assert order in (-1, 0, 1, 2, None), word
        assert meaning.strip() == meaning and len(meaning) > 1, word


@pytest.mark.parametrize("name", LISTS)
def test_no_word_reads_as_not_known_or_as_another_word(name: str) -> None:
    plain = [word.lower() for word in LISTS[name]]
    assert not UNKNOWN & set(plain)
    assert len(plain) == len(set(plain))
    assert all(word == word.replace(" ", "_").replace("-", "_") for word in plain)


@pytest.mark.parametrize("name", LISTS)
def test_a_list_is_wholly_ordered_or_wholly_neutral(name: str) -> None:
    neutral = {order is None for order, _ in LISTS[name].values()}
    assert len(neutral) == 1


@pytest.mark.parametrize("name", LISTS)
def test_an_ordered_list_has_an_adverse_word(name: str) -> None:
    orders = {order for order, _ in LISTS[name].values()}
    assert orders == {None} or max(orders) >= 1


@pytest.mark.parametrize(
    ("name", "word"),
    [("SENSATION", "grip"), ("SENSATION", "tingle"), ("DURATION", "longer"), ("TIMING", "while_holding"),
     ("SIGNS", "burn"), ("SIGNS", "lost_consciousness"), ("SIGNS", "chest_symptoms"), ("CONDITION", "wet"),
     ("CONDITION", "damaged"), ("CONDITION", "missing"), ("MOISTURE", "damp"), ("CHANGES", "cleaned"),
     ("CHANGES", "repaired"), ("DEPENDENCE", "life_support"), ("RESULT", "fail"),
     ("ALSO_TOUCHING", "earthed_metal"), ("FLAMMABLE", "oxygen")],
)  # fmt: skip
def test_what_speaks_for_danger_is_adverse(name: str, word: str) -> None:
    order = LISTS[name][word][0]
    assert order is not None and order >= 1


@pytest.mark.parametrize(
    ("name", "word"),
    [("SENSATION", "unclear"), ("TIMING", "unsure"), ("ALSO_TOUCHING", "unsure"), ("RESULT", "not_practicable"),
     ("TIMING", "on_release")],
)  # fmt: skip
def test_an_answer_that_settles_nothing_counts_as_not_known(name: str, word: str) -> None:
    assert LISTS[name][word][0] == 0
