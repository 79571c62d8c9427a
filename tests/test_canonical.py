import json
import math
import random

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.canonical import canonical, case_number, digest, is_case_number, new_record_id
from triage.errors import InvalidValue

TREES = st.recursive(
    st.text(st.characters(codec="utf-8")),
    lambda below: st.lists(below) | st.dictionaries(st.text(st.characters(codec="utf-8")), below),
)
ALPHABET = "0123456789ABCDEFGHJKMNPQRSTVWXYZ"
IDS = st.integers(0, 2**128 - 1).map(lambda n: f"{n:032x}")

# Written once and for ever: a change here breaks every digest that was ever printed. SHA-256 of the
# stated bytes can be repeated with any other tool (printf '...' | sha256sum).
GOLDEN = [
    ({}, "{}", "44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a"),
    (
        {"schema": "1", "id": "ab", "value": "1.9 mA"},
        '{"id":"ab","schema":"1","value":"1.9 mA"}',
        "3bf9626f5b2a0e2d402b84d1b34a12b68912b7cc9f3dc5c1f373b5a8fb1c4f00",
    ),
    (
        {"b": ["no", "12:30", "010"], "a": {"\u00b5": "\u2126", "Z": "\u00e4"}},
        '{"a":{"Z":"\u00e4","\u00b5":"\u2126"},"b":["no","12:30","010"]}',
        "f9f6f5db48db0f88aae829837028353172b89fbb21a30e284267804d537680fb",
    ),
    (
        {"t": 'a "quoted"\nline\\'},
        '{"t":"a \\"quoted\\"\\nline\\\\"}',
        "1674e54b222520d75d1ed6efde90731719667dcecddfc845e3a6dc60b932c16f",
    ),
]


@pytest.mark.parametrize(("tree", "form", "hexadecimal"), GOLDEN)
def test_the_canonical_form_and_its_digest_never_change(tree, form, hexadecimal) -> None:
    assert canonical(tree) == form.encode()
    assert digest(canonical(tree)) == hexadecimal


def test_the_digest_is_sha_256() -> None:
    # FIPS 180-4 example: SHA-256 of "abc".
    assert digest(b"abc") == "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"


@given(TREES)
def test_the_canonical_form_is_json_that_reads_back_as_the_same_tree(tree) -> None:
    assert json.loads(canonical(tree)) == tree


@given(st.dictionaries(st.text(st.characters(codec="utf-8")), st.text(st.characters(codec="utf-8"))),
       st.randoms())  # fmt: skip
def test_the_order_of_fields_does_not_matter(tree, source: random.Random) -> None:
    keys = list(tree)
    source.shuffle(keys)
    assert canonical({key: tree[key] for key in keys}) == canonical(tree)


def test_two_spellings_of_one_value_are_two_records() -> None:
    assert canonical({"v": "1.90 mA"}) != canonical({"v": "1.9 mA"})
    assert canonical({"v": "\u00e4"}) != canonical({"v": "a\u0308"})


@pytest.mark.parametrize("tree", [1, 1.5, None, True, {"a": 1}, ["x", None], {1: "a"}, {None: "a"},
                                  b"x", {"a": {"b": [2]}}, {"a": "\ud800"}, "\udfff"])  # fmt: skip
def test_anything_but_whole_text_is_refused(tree) -> None:
    with pytest.raises(InvalidValue):
        canonical(tree)


def test_record_ids_are_random_and_128_bits_wide() -> None:
    ids = {new_record_id() for _ in range(2000)}
    assert len(ids) == 2000
    assert all(len(each) == 32 and int(each, 16) >= 0 for each in ids)
    ones = sum(int(each, 16).bit_count() for each in ids)
    # 256 000 fair bits: sd of the share is 0.00099; six of them.
    assert abs(ones / (2000 * 128) - 0.5) < 6 * 0.5 / math.sqrt(2000 * 128)


def test_a_case_number_carries_45_bits_so_that_a_thousand_records_on_each_of_two_computers_never_meet() -> (
    None
):
    # Birthday bound: pairs / 2^45 = 2000 * 1999 / 2 / 2^45 = 5.7e-8, about 1 in 18 million.
    numbers = {case_number(f"{n << 83:032x}") for n in range(4096)}
    assert len(numbers) == 4096, "the top 45 bits all count"
    pairs = 2000 * 1999 / 2
    assert pairs / 32**9 < 1 / 17e6
    assert len({case_number(new_record_id()) for _ in range(2000)}) == 2000


@given(IDS)
def test_every_case_number_is_recognised_in_either_case_and_without_its_dash(
    record_id: str,
) -> None:
    number = case_number(record_id)
    assert is_case_number(number)
    assert is_case_number(number.lower().replace("-", ""))


@given(IDS, st.integers(0, 9), st.integers(1, 31))
def test_the_check_character_finds_every_single_slip(record_id: str, place: int, step: int) -> None:
    plain = case_number(record_id).replace("-", "")
    other = ALPHABET[(ALPHABET.index(plain[place]) + step) % 32]
    assert not is_case_number(plain[:place] + other + plain[place + 1 :])


def test_the_check_character_finds_nearly_every_swap_of_neighbours() -> None:
    # Luhn mod N misses only the swap of first and last symbol (0 and Z here).
    source, missed, swaps = random.Random(5), 0, 0
    for _ in range(3000):
        plain = case_number(f"{source.getrandbits(128):032x}").replace("-", "")
        place = source.randrange(9)
        pair = plain[place : place + 2]
        if pair[0] != pair[1]:
            swaps += 1
            found = is_case_number(plain[:place] + pair[::-1] + plain[place + 2 :])
            missed += found and set(pair) != {"0", "Z"}
    assert swaps > 2500 and missed == 0


@pytest.mark.parametrize(
    "text", ["", "0000-0000", "I0000-00000", "00000-0000O", "00000-000000", "\u00df0000-0000"]
)
def test_another_shape_or_a_letter_that_is_read_wrongly_is_no_case_number(text: str) -> None:
    assert not is_case_number(text)


@pytest.mark.parametrize(
    "record_id", ["", "0" * 31, "0" * 33, "G" * 32, "A" * 32, "0x" + "0" * 30, " " + "0" * 31]
)
def test_a_record_id_of_another_shape_is_refused(record_id: str) -> None:
    with pytest.raises(InvalidValue, match="32 hexadecimal digits"):
        case_number(record_id)
