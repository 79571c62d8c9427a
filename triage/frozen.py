"""`frozen`: makes the classes that pass between rooms, without generating code for each.

A frozen dataclass compiles six methods for every class, and with seventy classes that is a
quarter of the start-up of a command. A class made `frozen` shares one set of methods instead; it
behaves the same but is slower to build, so what is built by the hundred stays a plain dataclass.
"""

import dataclasses
from typing import Any, NoReturn, TypeVar, dataclass_transform

T = TypeVar("T")


@dataclass_transform(frozen_default=True)
def frozen(of: type[T]) -> type[T]:
    """Make a class of annotated fields a frozen value: built once, compared by content.

    Args:
        of: the class; fields may have defaults, and `__post_init__` is called.
    """
    made: Any = dataclasses.dataclass(init=False, repr=False, eq=False, slots=True)(of)
    for name, method in _METHODS.items():
        setattr(made, name, method)
    return made  # type: ignore[no-any-return]


def _init(self: Any, *given: Any, **named: Any) -> None:
    names = self.__slots__
    if len(given) > len(names):
        raise TypeError(f"{type(self).__name__} takes {len(names)} values, got {len(given)}")
    for name, found in zip(names, given, strict=False):
        if name in named:
            raise TypeError(f"{type(self).__name__} got {name} twice")
        object.__setattr__(self, name, found)
    for name in names[len(given) :]:
        found = named.pop(name) if name in named else _default(self, name)
        object.__setattr__(self, name, found)
    if named:
        raise TypeError(f"{type(self).__name__} has no field {', '.join(named)}")
    if hasattr(self, "__post_init__"):
        self.__post_init__()


def _default(self: Any, name: str) -> Any:
    default = self.__dataclass_fields__[name].default
    if default is dataclasses.MISSING:
        raise TypeError(f"{type(self).__name__} needs {name}")
    return default


def _content(self: Any) -> tuple[Any, ...]:
    return tuple(getattr(self, name) for name in self.__slots__)


def _equal(self: Any, other: object) -> Any:
    if type(other) is not type(self):
        return NotImplemented
    return _content(self) == _content(other)


def _hash(self: Any) -> int:
    return hash(_content(self))


def _repr(self: Any) -> str:
    shown = (f"{name}={getattr(self, name)!r}" for name in self.__slots__)
    return f"{type(self).__qualname__}({', '.join(shown)})"


def _refuse(self: Any, name: str, *_: object) -> NoReturn:
    raise dataclasses.FrozenInstanceError(f"{name} of {type(self).__name__} cannot be changed")


_METHODS: dict[str, Any] = {
    "__init__": _init, "__eq__": _equal, "__hash__": _hash, "__repr__": _repr,
    "__setattr__": _refuse, "__delattr__": _refuse,
}  # fmt: skip
