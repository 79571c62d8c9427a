"""Induction: a person who floats beside a charged object, or leaves its field."""

from triage.errors import InvalidValue
from triage.estimate import Estimate, product, through
from triage.physics.charging import Charged, softplus


def induced_voltage(source_voltage: float, coupling: float, own: float) -> float:
    """Voltage of a floating person beside a charged object, for instance behind a plastic handle.

    Args:
        source_voltage: of the object [V].
        coupling: capacitance between the two [F], above 0.
        own: capacitance of the person to earth [F], above 0.

    Returns:
        Voltage of the person to earth [V].

    Source:
        Capacitive divider, textbook electrostatics.

    >>> round(induced_voltage(8000, 20e-12, 130e-12))
    1067
    """
    if not (coupling > 0 and own > 0):
        raise InvalidValue(f"capacitances must be above 0, got {coupling!r} and {own!r}")
    return source_voltage * coupling / (coupling + own)


def voltage_after_leaving(source_voltage: float, coupling: float, own: float) -> float:
    """Voltage left on a person who touched earth beside a charged object and then walked away.

    Args:
        source_voltage: of the object while the person was earthed [V].
        coupling: capacitance between the two at that time [F], 0 or more.
        own: capacitance of the person to earth afterwards [F], above 0.

    Returns:
        Voltage of the person [V], of the opposite sign.

    Source:
        The charge -C V induced while earthed is trapped; textbook electrostatics.

    >>> round(voltage_after_leaving(8000, 20e-12, 130e-12))
    -1231
    """
    if not (coupling >= 0 and own > 0):
        raise InvalidValue(f"capacitances must be above 0, got {coupling!r} and {own!r}")
    return -source_voltage * coupling / own


def beside(source: Charged, *, coupling: Estimate, own: Estimate) -> Charged:
    """A floating person beside a charged object, as a body that can be discharged.

    Args:
        source: the object.
        coupling: capacitance between the two [F].
        own: capacitance of the person to earth [F].

    Returns:
        The person, with the voltage of `induced_voltage`; on touching earth the charge that
        passes is coupling times the object's voltage, so both capacitances count.
    """
    ratio = own.over(coupling, "")
    share = through(lambda r: -softplus(r), ratio, unit="", order=10)
    both = through(softplus, ratio, unit="", order=10)
    return Charged(product("V", source.voltage, share), product("F", coupling, both))


def after_leaving(source: Charged, *, coupling: Estimate, own: Estimate) -> Charged:
    """A person who touched earth beside a charged object and walked away; size without sign.

    Args:
        source: the object at that time.
        coupling: capacitance between the two at that time [F].
        own: capacitance of the person to earth afterwards [F].
    """
    return Charged(product("V", source.voltage, coupling, own.power(-1, "1/F")), own)
