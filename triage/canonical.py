"""Canonical form, digests and the numbers a record carries.

Built for ever: a digest printed on a report must be found again in years. The canonical form is
UTF-8 JSON with sorted keys and no blanks, every scalar the text as typed.
"""

import hashlib
import json
from typing import Any

from triage.errors import InvalidValue

_ALPHABET = "0123456789ABCDEFGHJKMNPQRSTVWXYZ"  # no I, L, O, U: read aloud and by hand


def canonical(tree: Any) -> bytes:
    """The one byte form of a tree of dicts, lists and texts.

    Raises:
        InvalidValue: anything else than dict, list and text, a key that is not text, or a lone
            surrogate.

    >>> canonical({"b": ["1.9 mA"], "a": "x"})
    b'{"a":"x","b":["1.9 mA"]}'
    """
    _only_text(tree)
    text = json.dumps(tree, ensure_ascii=False, sort_keys=True, separators=(",", ":"))
    try:
        return text.encode()
    except UnicodeEncodeError:
        raise InvalidValue("a text holds half a character (a lone surrogate)") from None


def _only_text(tree: Any) -> None:
    if isinstance(tree, dict):
        for key, value in tree.items():
            if not isinstance(key, str):
                raise InvalidValue(f"key {key!r} is not text")
            _only_text(value)
    elif isinstance(tree, list | tuple):
        for value in tree:
            _only_text(value)
    elif not isinstance(tree, str):
        raise InvalidValue(f"{tree!r} is not text; the canonical form keeps scalars as typed")


def digest(data: bytes) -> str:
    """SHA-256 in lower-case hexadecimal.

    >>> digest(b"")[:8]
    'e3b0c442'
    """
    return hashlib.sha256(data).hexdigest()


def new_record_id() -> str:
    """A random 128-bit id, 32 hexadecimal digits; written into a record once."""
    import secrets

    return secrets.token_hex(16)


def case_number(record_id: str) -> str:
    """The short number spoken and written on tags, made from the record id without any network.

    Nine base-32 characters (45 random bits: two laptops making a thousand records each meet
    with a chance of about 1 in 18 million) and a check character (Luhn mod N, N = 32).

    Raises:
        InvalidValue: the id is not 32 hexadecimal digits.

    >>> case_number("00" * 16)
    '00000-00000'
    """
    if len(record_id) != 32 or any(c not in "0123456789abcdef" for c in record_id):
        raise InvalidValue("a record id is 32 hexadecimal digits, written once by `triage`")
    bits = int(record_id, 16) >> (128 - 45)
    body = "".join(_ALPHABET[bits >> shift & 31] for shift in range(40, -1, -5))
    whole = body + _check_character(body)
    return f"{whole[:5]}-{whole[5:]}"


def _check_character(body: str) -> str:
    """Luhn mod N over the base-32 alphabet: every single slip and nearly every swap is found."""
    total = 0
    for place, character in enumerate(reversed(body)):
        doubled = _ALPHABET.index(character) * (2 if place % 2 == 0 else 1)
        total += doubled // 32 + doubled % 32
    return _ALPHABET[-total % 32]


def is_case_number(text: str) -> bool:
    """Whether a typed case number has the right shape and check character.

    >>> is_case_number("00000-00000"), is_case_number("00000-00001")
    (True, False)
    """
    plain = text.upper().replace("-", "")
    known = len(plain) == 10 and all(c in _ALPHABET for c in plain)
    return known and _check_character(plain[:9]) == plain[9]
