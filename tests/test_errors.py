import inspect

import pytest

from triage import errors

DELIBERATE = [
    each
    for each in vars(errors).values()
    if inspect.isclass(each) and each.__module__ == errors.__name__
]


@pytest.mark.parametrize("each", DELIBERATE, ids=lambda each: each.__name__)
def test_every_deliberate_error_is_caught_as_one_kind(each: type) -> None:
    assert issubclass(each, errors.TriageError)
    assert each.__doc__


def test_an_impossible_value_is_also_a_value_error_for_other_libraries() -> None:
    assert issubclass(errors.InvalidValue, ValueError)
    assert issubclass(errors.OutOfRange, errors.InvalidValue)


def test_out_of_range_says_what_where_and_what_the_source_covers() -> None:
    error = errors.OutOfRange("temperature", 80, -45, 60, "degC", "WMO-No. 8, annex 4.B")
    assert str(error) == "temperature is 80 degC; WMO-No. 8, annex 4.B covers -45 to 60 degC"
    assert (error.name, error.value, error.low, error.high) == ("temperature", 80, -45, 60)


def test_a_bad_record_keeps_every_fault_as_its_own_line() -> None:
    error = errors.BadRecord(["a:1:1 x: one", "a:2:1 y: two"])
    assert error.faults == ["a:1:1 x: one", "a:2:1 y: two"]
    assert str(error).splitlines() == error.faults
