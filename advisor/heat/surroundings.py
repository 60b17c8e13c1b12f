"""What a face of a body meets: air, wind, sky, sun and other gains, steady or moving in time."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.heat.arrays import Floats, Numbers

STEFAN_BOLTZMANN_WM2K4 = 5.670374419e-8  # CODATA 2018, exact since the SI of 2019
ZERO_C_IN_K = 273.15


@dataclass(frozen=True)
class Series:
    """A quantity that moves in time: straight lines between knots.

    ``times_s`` of shape (m,) rise from 0 or before; a time written twice is a jump there.
    ``values`` has shape (m,) or (m, cases). Before the first and after the last knot the end
    value holds.
    """

    times_s: Floats
    values: Floats

    def __post_init__(self) -> None:
        times, values = np.asarray(self.times_s, float), np.asarray(self.values, float)
        if times.ndim != 1 or len(times) != len(values) or (np.diff(times) < 0).any():
            raise ValueError("a series needs one value for each of its times, in rising order")
        object.__setattr__(self, "times_s", times)
        object.__setattr__(self, "values", values)

    def at(self, time_s: Numbers, just_before: bool = False) -> Floats:
        """Value at ``time_s``, scalar or (cases,); at a jump the later one or the one before."""
        time = np.asarray(time_s, float)
        passed = np.searchsorted(self.times_s, time, side="left" if just_before else "right")
        after = np.clip(passed, 1, len(self.times_s) - 1)
        start, end = self.times_s[after - 1], self.times_s[after]
        width = np.where(end > start, end - start, 1.0)
        part = np.clip((time - start) / width, 0.0, 1.0)
        if self.values.ndim == 1 or time.ndim == 0:
            low, high = self.values[after - 1], self.values[after]
        else:
            case = np.arange(len(time))
            low, high = self.values[after - 1, case], self.values[after, case]
        found: Floats = low + part * (high - low)
        return found

    def scaled(self, factor: Numbers) -> Series:
        """The series times ``factor``, a number or one for each case."""
        return Series(self.times_s, _rows(self.values, factor) * np.asarray(factor, float))

    def plus(self, amount: Numbers) -> Series:
        """The series plus ``amount``, a number or one for each case."""
        return Series(self.times_s, _rows(self.values, amount) + np.asarray(amount, float))

    def part(self, cases: slice) -> Series:
        """The series of some of the cases."""
        return self if self.values.ndim == 1 else Series(self.times_s, self.values[:, cases])


def _rows(values: Floats, other: Numbers) -> Floats:
    """``values`` (m,) as a column where ``other`` has cases."""
    return values[:, None] if values.ndim == 1 and np.ndim(other) else values


Moving = Numbers | Series


@dataclass(frozen=True)
class Still:
    """A face at one moment; fields as of ``Face``, nothing moving."""

    coefficient_wm2k: Floats
    air_c: Floats
    emissivity: Floats
    sky_c: Floats
    gain_wm2: Floats


@dataclass(frozen=True)
class Face:
    """Surroundings of one face; every field broadcasts over cases or is a Series.

    ``coefficient_wm2k`` is convection alone where ``emissivity`` is given, else the whole
    coefficient to ``air_c``. ``sky_c`` is what the face radiates to. ``gain_wm2`` is heat put in:
    absorbed sun, a heater; evaporation counts below 0.
    """

    coefficient_wm2k: Moving
    air_c: Moving
    emissivity: Moving = 0.0
    sky_c: Moving = 0.0
    gain_wm2: Moving = 0.0

    def knots_s(self) -> Floats:
        """Every time [s] at which a line bends or jumps; none where nothing moves."""
        moving = [one.times_s for one in self._fields() if isinstance(one, Series)]
        return np.unique(np.concatenate(moving)) if moving else np.empty(0)

    def shapes(self) -> list[tuple[int, ...]]:
        """Shapes over cases of everything the face holds."""
        return [shape_of(one) for one in self._fields()]

    def part(self, cases: slice, count: int) -> Face:
        """The face of some of the ``count`` cases."""
        return Face(*(_part(one, cases, count) for one in self._fields()))

    def at(self, time_s: Numbers, just_before: bool = False) -> Still:
        """The face as it is at ``time_s``; at a jump the later one or the one before."""
        return Still(*(value_of(one, time_s, just_before) for one in self._fields()))

    def _fields(self) -> tuple[Moving, ...]:
        return self.coefficient_wm2k, self.air_c, self.emissivity, self.sky_c, self.gain_wm2


def value_of(value: Moving, time_s: Numbers, just_before: bool = False) -> Floats:
    """What ``value`` is at ``time_s``, in its own unit."""
    if isinstance(value, Series):
        return value.at(time_s, just_before)
    return np.asarray(value, float)


def shape_of(value: Moving | None) -> tuple[int, ...]:
    """Shape over cases of ``value``; that of a number where there is none."""
    if value is None:
        return ()
    return value.values.shape[1:] if isinstance(value, Series) else np.shape(value)


def _part(field: Moving, cases: slice, count: int) -> Moving:
    if isinstance(field, Series):
        return field.part(cases)
    values = np.asarray(field, float)
    return values if values.ndim == 0 else np.broadcast_to(values, (count,))[cases]


def absorbed_wm2(sun_wm2: Moving, absorptivity: Numbers) -> Moving:
    """Share ``absorptivity`` [1] of the sun that a face takes [W/m2], moving as the sun does."""
    if isinstance(sun_wm2, Series):
        return sun_wm2.scaled(absorptivity)
    return np.asarray(np.multiply(sun_wm2, absorptivity))


def radiation_coefficient_wm2k(emissivity: Numbers, surface_c: Numbers, sky_c: Numbers) -> Floats:
    """Coefficient [W/m2K] which times surface minus sky [C] gives the net long-wave loss."""
    surface_k = np.asarray(surface_c, float) + ZERO_C_IN_K
    sky_k = np.asarray(sky_c, float) + ZERO_C_IN_K
    squares = surface_k**2 + sky_k**2
    coefficient: Floats = (
        np.asarray(emissivity, float) * STEFAN_BOLTZMANN_WM2K4 * squares * (surface_k + sky_k)
    )
    return coefficient
