"""Values behave as frozen dataclasses do."""

from dataclasses import FrozenInstanceError, dataclass, replace

import pytest

from triage.frozen import frozen


@frozen
class Pair:
    """Two numbers."""

    first: int
    second: int = 2

    def __post_init__(self) -> None:
        if self.first < 0:
            raise ValueError("first is 0 or more")


@dataclass(frozen=True, slots=True)
class Twin:
    """The same as a dataclass."""

    first: int
    second: int = 2


@pytest.mark.parametrize(("given", "named"), [((1,), {}), ((1, 3), {}), ((), {"first": 1}),
                                              ((1,), {"second": 5})])  # fmt: skip
def test_a_value_is_built_compared_and_shown_like_a_frozen_dataclass(given, named) -> None:
    made, twin = Pair(*given, **named), Twin(*given, **named)

    assert (made.first, made.second) == (twin.first, twin.second)
    assert repr(made) == repr(twin).replace("Twin", "Pair")
    assert made == Pair(*given, **named) and hash(made) == hash(Pair(*given, **named))
    assert made != replace(made, second=99) and made != twin


@pytest.mark.parametrize(("given", "named"), [((), {}), ((1, 2, 3), {}), ((1,), {"first": 1}),
                                              ((1,), {"third": 3})])  # fmt: skip
def test_wrong_fields_are_refused(given, named) -> None:
    with pytest.raises(TypeError):
        Pair(*given, **named)


def test_a_value_is_never_changed_and_its_own_check_is_called() -> None:
    made = Pair(1)
    with pytest.raises(FrozenInstanceError):
        made.first = 2
    with pytest.raises(FrozenInstanceError):
        del made.first
    with pytest.raises(ValueError, match="0 or more"):
        Pair(-1)
