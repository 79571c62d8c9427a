"""Relative humidity: from the sensor to the place, its doubt, and how charging answers to it."""

from collections.abc import Iterable
from dataclasses import dataclass
from math import exp, log, sqrt

from triage.bounds import Basis
from triage.errors import InvalidValue, OutOfRange
from triage.estimate import Estimate
from triage.quadrature import normal_cdf, normal_density

SOURCE = "humidity"
"""Name of the source of doubt that every answer to humidity shares."""

WMO = "WMO-No. 8 (2008), Annex 4.B"


@dataclass(frozen=True, slots=True)
class Humidity:
    """Relative humidity where and when it mattered.

    Args:
        fraction: relative humidity over water, 0 to 1.
        sd: standard deviation of its doubt, in the same unit.
        kind: `measured`, `derived` or `default`, as for a basis.

    Raises:
        InvalidValue: outside 0 to 1, or a negative doubt.
    """

    fraction: float
    sd: float = 0.0
    kind: str = "default"

    @property
    def basis(self) -> dict[str, Basis]:
        """Its entry in the list of inputs."""
        note = f"{self.fraction * 100:.0f} % RH, sd {self.sd * 100:.1f} points"
        return {SOURCE: Basis("relative humidity", self.kind, note)}

    def __post_init__(self) -> None:
        """Refuse what cannot be."""
        if not (0 <= self.fraction <= 1 and self.sd >= 0):
            raise InvalidValue(
                f"relative humidity must be 0 to 1 with a doubt of 0 or more, "
                f"got {self.fraction!r} and {self.sd!r}"
            )


@dataclass(frozen=True, slots=True)
class Response:
    """How ln of a voltage answers to relative humidity: straight pieces between knees.

    Args:
        reference: relative humidity at which the answer is 0, below the first knee.
        knees: relative humidities where the slope changes, rising.
        slopes: d ln V / d RH, one more than there are knees, none above 0.

    Raises:
        InvalidValue: a slope is positive, or the numbers do not fit together.
    """

    reference: float
    knees: tuple[float, ...]
    slopes: tuple[float, ...]

    def __post_init__(self) -> None:
        """Refuse a response under which damper air charges more."""
        fits = len(self.slopes) == len(self.knees) + 1 and list(self.knees) == sorted(self.knees)
        if not fits or max(self.slopes) > 0 or (self.knees and self.reference > self.knees[0]):
            raise InvalidValue(f"not a falling response to humidity: {self!r}")

    def at(self, fraction: float) -> float:
        """Ln of the voltage relative to the reference humidity.

        >>> round(Response(0.25, (0.4,), (-2.2, -4.5)).at(0.5), 3)
        -0.78
        """
        changes = zip(self.knees, self.slopes, self.slopes[1:], strict=False)
        bends = sum((after - before) * max(fraction - k, 0) for k, before, after in changes)
        return self.slopes[0] * (fraction - self.reference) + bends

    def factor(self, humidity: Humidity) -> Estimate:
        """The factor on a voltage, with the doubt about humidity under the name `humidity`.

        Lognormal when no knee lies within four standard deviations. Otherwise the lognormal with
        the same mean and the same covariance with humidity (both exact; Stein's identity): no
        kink is left to integrate across, and even at a knee with a doubt of 8 points no
        probability moves by more than 0.01.
        """
        mean, sd = humidity.fraction, humidity.sd
        if sd == 0:
            return Estimate.exact(exp(self.at(mean)), "")
        middle, slope = self.slopes[0] * (mean - self.reference), self.slopes[0]
        for k, before, after in zip(self.knees, self.slopes, self.slopes[1:], strict=False):
            z = (mean - k) / sd
            middle += (after - before) * ((mean - k) * normal_cdf(z) + sd * normal_density(z))
            slope += (after - before) * normal_cdf(z)
        return Estimate.lognormal(exp(middle), {SOURCE: slope * sd}, "", humidity.basis)


def resistance_factor(humidity: Humidity, decades: float, reference: float = 0.25) -> Estimate:
    """Factor on a resistance that falls by decades as the air gets damper.

    Args:
        humidity: where and when it mattered.
        decades: decades lost for 0.1 more relative humidity, 0 or more.
        reference: relative humidity at which the factor is 1.

    >>> round(resistance_factor(Humidity(0.45), 0.5).median, 6)  # one decade for 0.2
    0.1
    """
    if decades < 0:
        raise InvalidValue(f"damp air never raises a resistance, got {decades!r} decades")
    slope = -decades * log(10) / 0.1
    median = exp(slope * (humidity.fraction - reference))
    return Estimate.lognormal(median, {SOURCE: slope * humidity.sd}, "", humidity.basis)


def saturation_pressure(temperature: float) -> float:
    """Saturation vapour pressure over liquid water.

    Args:
        temperature: [degC], -45 to 60.

    Returns:
        Pressure [Pa].

    Raises:
        OutOfRange: outside the range of the formula.

    Source:
        Magnus form of WMO-No. 8 (2008), Annex 4.B; within 0.3 % of the steam tables at 5-40 degC.

    >>> round(saturation_pressure(20), 1)
    2332.6
    """
    if not -45 <= temperature <= 60:
        raise OutOfRange("temperature", temperature, -45, 60, "degC", WMO)
    return 611.2 * exp(17.62 * temperature / (243.12 + temperature))


def saturation_pressure_ice(temperature: float) -> float:
    """Saturation vapour pressure over ice [Pa], for -65 to 0 degC.

    Raises:
        OutOfRange: outside the range of the formula.

    Source:
        Magnus form of WMO-No. 8 (2008), Annex 4.B, over ice; coefficients from memory.
    """
    if not -65 <= temperature <= 0:
        raise OutOfRange("temperature", temperature, -65, 0, "degC", WMO)
    return 611.2 * exp(22.46 * temperature / (272.62 + temperature))


def transferred(fraction: float, sensor: float, place: float) -> float:
    """Relative humidity of the same air at another temperature.

    Args:
        fraction: relative humidity at the sensor, 0 to 1.
        sensor: air temperature there [degC].
        place: air temperature where it mattered [degC]; same air mass, no moisture source.

    Returns:
        Relative humidity, 0 to 1.

    Raises:
        OutOfRange: the air would be beyond saturation at the place, or a temperature is outside
            the range of the vapour pressure.

    Source:
        Constant vapour pressure, as in psychrometric practice.

    >>> round(transferred(0.30, 22, 18), 4)
    0.3843
    """
    found = fraction * saturation_pressure(sensor) / saturation_pressure(place)
    if not 0 <= found <= 1:
        raise OutOfRange("relative humidity", found, 0, 1, "", "air without condensation")
    return found


def transfer_doubt(fraction: float, place: float, sds: Iterable[float]) -> float:
    """Standard deviation of a transferred relative humidity.

    Args:
        fraction: relative humidity at the place, 0 to 1.
        place: air temperature there [degC].
        sds: standard deviation of the sensor's humidity, then of each temperature involved
            [degC].

    Source:
        First order: d ln p / dt of the Magnus form, about -6 % of RH for each degree at 22 degC.

    >>> round(transfer_doubt(0.30, 22, (0.02, 0.5, 1.0)), 3)
    0.029
    """
    own, *temperatures = sds
    per_degree = fraction * 17.62 * 243.12 / (243.12 + place) ** 2
    return sqrt(own**2 + sum((per_degree * sd) ** 2 for sd in temperatures))


def dew_point(temperature: float, fraction: float) -> float:
    """Temperature at which the air would be saturated over liquid water, even below 0 degC.

    Args:
        temperature: of the air [degC].
        fraction: relative humidity over water, above 0 to 1.

    Returns:
        Dew point [degC].

    Source:
        Inverse of the Magnus form, WMO-No. 8 (2008), Annex 4.B.

    >>> round(dew_point(27, 0.08), 2)
    -10.11
    """
    return _inverse(temperature, fraction, 17.62, 243.12)


def frost_point(temperature: float, fraction: float) -> float | None:
    """Temperature at which the air would be saturated over ice; None if that is above 0 degC.

    Below 0 degC psychrometric programs print this one, about 1 degC above the dew point.

    >>> round(frost_point(27, 0.08), 1)
    -9.0
    """
    found = _inverse(temperature, fraction, 22.46, 272.62)
    return found if found <= 0 else None


def _inverse(temperature: float, fraction: float, a: float, b: float) -> float:
    if not 0 < fraction <= 1:
        raise InvalidValue(f"relative humidity must be above 0 and at most 1, got {fraction!r}")
    x = log(fraction * saturation_pressure(temperature) / 611.2)
    return b * x / (a - x)
