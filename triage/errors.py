"""Every error raised on purpose. Imports nothing, so that every room may use it.

The command line catches `TriageError` and nothing wider: anything else is a bug and shows itself.
"""


class TriageError(Exception):
    """Base of every deliberate error: its text says what, where and what would do."""


class InvalidValue(TriageError, ValueError):
    """A value that cannot be, whatever its source."""


class OutOfRange(InvalidValue):
    """An input outside the range a formula or table was published for.

    Callers that must go on catch it and carry *unknown*, never zero.
    """

    def __init__(self, name: str, value: float, low: float, high: float, unit: str, source: str):
        """Keep the parts: input name, its value, the published range, SI unit and source."""
        super().__init__(f"{name} is {value:g} {unit}; {source} covers {low:g} to {high:g} {unit}")
        self.name, self.value, self.low, self.high, self.unit = name, value, low, high, unit
        self.source = source


class BadRecord(TriageError):
    """A file that cannot be taken as a record or site file; holds every fault found in it."""

    def __init__(self, faults: list[str]):
        """Keep each fault as one line: file, line, column, path, what was found, what would do."""
        super().__init__("\n".join(faults))
        self.faults = faults


class BadTable(TriageError):
    """A shipped data table that contradicts itself or another one."""


class CannotRead(TriageError):
    """A file that cannot be read."""


class CannotTell(TriageError):
    """A file that can be read in more than one way; the text names the option that decides."""


class CannotWrite(TriageError):
    """A file that cannot be written."""


class MissingLibrary(TriageError):
    """A system library that rendering needs is absent; the text says how to get it."""
