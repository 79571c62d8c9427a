import pytest

from triage.citation import KNOWN, Citation
from triage.errors import BadTable


def test_only_three_words_say_how_a_number_is_known() -> None:
    assert KNOWN == ("published", "memory", "judgement")


@pytest.mark.parametrize("known", KNOWN)
def test_a_citation_prints_source_place_and_how_it_is_known(known: str) -> None:
    assert Citation("IEC 60479-1", "table 1", known).text() == f"IEC 60479-1, table 1 ({known})"


def test_a_citation_without_a_place_prints_no_empty_place() -> None:
    assert Citation("own reason").text() == "own reason (judgement)"


def test_how_a_number_is_known_defaults_to_the_weakest_word() -> None:
    assert Citation("own reason").known == "judgement"


@pytest.mark.parametrize("source", ["", "  "])
def test_a_citation_without_a_source_is_refused(source: str) -> None:
    with pytest.raises(BadTable, match="needs a source"):
        Citation(source, "table 1", "published")


@pytest.mark.parametrize("known", ["seen", "Published", "", "sure"])
def test_another_word_for_how_a_number_is_known_is_refused(known: str) -> None:
    with pytest.raises(BadTable, match="published, memory, judgement"):
        Citation("IEC 60479-1", "table 1", known)
