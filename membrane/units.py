"""Physical quantities: field types that take "356 mm" or a bare SI number and give a float.

Each type is a float for type checkers, a Varying one a float or a function of place;
pydantic calls its ``Quantity`` to read a value.
Inside the program every quantity is in SI units, an angle in radians, an interval in cents.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache
from math import inf, isclose, isfinite, pi
from numbers import Real
from pathlib import Path
from typing import Annotated, Any, TypeAlias

from membrane.common_units import COMMON_UNITS
from membrane.records.function import Amount, Function
from membrane.records.sign import Sign
from membrane.wording import nearest, shown

_NUMBER_AND_UNIT = re.compile(r"\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*(.*?)\s*")
_NAME_AND_POWER = r"(?:[^\W\d_]\w*|°)(?:(?:\^|\*\*)-?\d)?"
_UNIT = re.compile(rf"{_NAME_AND_POWER}(?:(?:\s*[*·/]\s*|\s+){_NAME_AND_POWER}){{0,9}}")
_LONGEST_UNIT = 60
_DECIMAL_COMMA = re.compile(r"\s*[+-]?(\d*),(\d+)(?![\d,])")
_MARKED = re.compile(r"\s*([+-]?[\d.]+)\s*(?:(\"|''|″|”)|('|′|’))\s*")
"""A number with an inch mark, or with a foot mark."""
_TURN = 2.0 * pi * (1.0 + 1e-9)


@dataclass(frozen=True)
class Quantity:
    """What a field measures.

    noun : with its article, such as "a length"
    unit : the SI unit, as pint spells it
    example : a value that a user could write
    varying : which numbers it may have where it varies over the head; None where it
        may not vary
    """

    noun: str
    unit: str
    example: str
    sign: Sign = Sign.ANY
    varying: Sign | None = None

    def read(self, value: Any) -> Amount:
        """The SI number of "356 mm", or of a bare SI number; a function of place of a table.

        Raises ValueError with a sentence.
        """
        from membrane.varying import is_varying

        if is_varying(value):
            return self._function(value)
        if isinstance(value, str):
            number = self._from_text(value)
        elif isinstance(value, Real) and not isinstance(value, bool):
            number = float(value)
        else:
            raise ValueError(self._expected(f"got {shown(value)}."))
        self._check(number, value)
        return number

    def __get_pydantic_core_schema__(self, source: Any, handler: Any) -> Any:
        from pydantic_core import core_schema

        return core_schema.no_info_plain_validator_function(self.read)

    def _function(self, value: Any) -> Function:
        """Raises KeyProblem where the table of a formula and the like is not sound."""
        from membrane.varying import KeyProblem, read_function

        if self.varying is None:
            raise ValueError("cannot vary over the head; give one number with its unit.")
        function, unit = read_function(value)
        try:
            factor = 1.0 if unit is None else float(self._factor(unit, unit))
        except ValueError as failure:
            raise KeyProblem("unit", str(failure)) from None
        return replace(function, factor=factor, unit=self.unit, noun=self.noun, sign=self.varying)

    def _from_text(self, text: str) -> float:
        self._refuse_spelling(text)
        found = _NUMBER_AND_UNIT.fullmatch(text)
        if not found:
            raise ValueError(self._expected(f"got {shown(text)}."))
        number, unit = found.groups()
        if not unit:
            raise ValueError(self._expected(f"got {shown(text)}, which has no unit."))
        factor = self._factor(unit, text)
        if not isfinite(float(number)) or float(number) == 0.0:
            return float(number)
        try:
            return float(Fraction(number) * factor)
        except OverflowError:
            return inf

    def _refuse_spelling(self, text: str) -> None:
        """Raise ValueError with the remedy for a decimal comma, inch marks and foot marks."""
        marked, comma = _MARKED.fullmatch(text), _DECIMAL_COMMA.match(text)
        if marked:
            meant = shown(f"{marked[1]} {'in' if marked[2] else 'ft'}")
        elif comma:
            meant = shown(text.strip().replace(",", ".", 1))
            thousands = len(comma[2]) == 3 and comma[1].strip("0")
            meant += f" or {shown(text.strip().replace(',', '', 1))}" if thousands else ""
        else:
            return
        raise ValueError(self._expected(f"got {shown(text)}; write {meant}."))

    def _factor(self, unit: str, text: str) -> Fraction:
        """How many SI units one ``unit`` is, as exactly as its definition."""
        try:
            factor, root = _root(unit)
        except ValueError:
            hint = nearest(unit, COMMON_UNITS)
            reason = f"got {shown(text)}, whose unit is unknown{hint}"
            raise ValueError(self._expected(reason)) from None
        own_factor, own_root = _root(self.unit)
        if root != own_root:
            raise ValueError(self._expected(f"got {shown(text)}."))
        return _exact(factor / own_factor)

    def _check(self, number: float, value: Any) -> None:
        if not isfinite(number):
            raise ValueError(self._expected(f"got {shown(value)}, which is not finite."))
        if not self.sign.allows(number):
            wanted = self.sign.worded(self.noun)
            raise ValueError(
                f"expected {wanted} such as {shown(self.example)}, got {shown(value)}."
            )

    def _expected(self, reason: str) -> str:
        return f"expected {self.noun} such as {shown(self.example)}, {reason}"


@dataclass(frozen=True)
class _Angle(Quantity):
    """An angle within one turn, so that degrees given as bare numbers are noticed."""

    def _check(self, number: float, value: Any) -> None:
        super()._check(number, value)
        if abs(number) > _TURN:
            hint = "" if isinstance(value, str) else f"; write {shown(f'{value:g} deg')}"
            raise ValueError(f"expected an angle within one turn, got {shown(value)}{hint}.")


@dataclass(frozen=True)
class _Unit(Quantity):
    """A unit by its name, "mm", or by what it measures, "25.4 mm"."""

    def read(self, value: Any) -> float | Function:
        if isinstance(value, str) and value.strip()[:1].isalpha():
            return float(self._factor(value.strip(), value))
        return super().read(value)


@dataclass(frozen=True)
class _File:
    """The path of a file that is there; a relative one starts from the study's folder.

    The reader of a study hands that folder over as the pydantic context's ``base``.
    """

    def read(self, value: Any, info: Any) -> Path:
        """The whole path. Raises ValueError with a sentence."""
        if not isinstance(value, str | Path):
            raise ValueError(f"expected the path of a file, got {shown(value)}.")
        base = Path((info.context or {}).get("base", "."))
        path = (base / Path(value).expanduser()).resolve()
        if not path.is_file():
            raise ValueError(f"there is no file {path}; its path starts from the study file.")
        return path

    def __get_pydantic_core_schema__(self, source: Any, handler: Any) -> Any:
        from pydantic_core import core_schema

        return core_schema.with_info_plain_validator_function(self.read)


def _root(unit: str) -> tuple[float, str]:
    """Factor and name of pint's root unit. Raises ValueError for an unknown unit."""
    return COMMON_UNITS.get(unit) or _root_by_pint(unit)


@lru_cache(maxsize=256)
def _root_by_pint(unit: str) -> tuple[float, str]:
    import pint

    if len(unit) > _LONGEST_UNIT or not _UNIT.fullmatch(unit):
        raise ValueError(unit)
    registry = _registry()
    try:
        factor, root = registry.get_root_units(registry.parse_units(unit))
    except (pint.PintError, AssertionError, TypeError, ArithmeticError) as failure:
        raise ValueError(unit) from failure
    return float(factor), str(root)


@lru_cache(maxsize=1)
def _registry() -> Any:
    """Pint's units and the cent; read from pint's cache where there is a sound one."""
    from pickle import UnpicklingError

    import pint

    registry: Any
    try:
        registry = pint.UnitRegistry(cache_folder=":auto:")
    except (OSError, EOFError, UnpicklingError):
        registry = pint.UnitRegistry(cache_folder=None)
    registry.define("cent = [pitch_interval]")
    return registry


def _exact(factor: float) -> Fraction:
    """0.001 as 1/1000, so that "356 mm" is the number that 0.356 is."""
    short = f"{factor:.12g}"
    return Fraction(short) if isclose(float(short), factor, rel_tol=1e-15) else Fraction(factor)


def _positive(quantity: Quantity) -> Quantity:
    return replace(quantity, sign=Sign.POSITIVE)


def _varying(quantity: Quantity) -> Quantity:
    return replace(quantity, varying=quantity.sign)


_LENGTH = Quantity("a length", "m", "356 mm")
_ANGLE = _Angle("an angle", "rad", "30 deg")
_AREAL_DENSITY = Quantity("an areal density", "kg/m^2", "0.26 kg/m^2", Sign.NOT_NEGATIVE)
_LINE_TENSION = Quantity("a tension per length", "N/m", "3 kN/m")
_BEDDING = Quantity("a bedding", "N/m^3", "1e5 N/m^3", Sign.NOT_NEGATIVE)
_LINE_STIFFNESS = Quantity("a stiffness per length", "N/m^2", "2e4 N/m^2", Sign.NOT_NEGATIVE)
_LINE_DENSITY = Quantity("a mass per length", "kg/m", "0.02 kg/m", Sign.NOT_NEGATIVE)
_FREQUENCY = Quantity("a frequency", "Hz", "440 Hz", Sign.NOT_NEGATIVE)
_CENTS = Quantity("an interval", "cent", "0.01 cent")
_DENSITY = Quantity("a density", "kg/m^3", "1390 kg/m^3", Sign.NOT_NEGATIVE)
_PRESSURE = Quantity("a pressure", "Pa", "101 kPa")

SI_UNITS = tuple(
    quantity.unit
    for quantity in (
        *(_LENGTH, _ANGLE, _AREAL_DENSITY, _LINE_TENSION, _BEDDING, _LINE_STIFFNESS),
        *(_LINE_DENSITY, _FREQUENCY, _CENTS, _DENSITY, _PRESSURE),
    )
)
"""The units of all quantities of a study."""

Length: TypeAlias = Annotated[float, _LENGTH]
UnitOfLength: TypeAlias = Annotated[float, _Unit("a unit of length", "m", "mm", Sign.POSITIVE)]
PositiveLength: TypeAlias = Annotated[float, _positive(_LENGTH)]
Point: TypeAlias = tuple[Length, Length]
Angle: TypeAlias = Annotated[float, _ANGLE]
ArealDensity: TypeAlias = Annotated[float, _AREAL_DENSITY]
PositiveArealDensity: TypeAlias = Annotated[float, _positive(_AREAL_DENSITY)]
LineTension: TypeAlias = Annotated[float, _LINE_TENSION]
PositiveLineTension: TypeAlias = Annotated[float, _positive(_LINE_TENSION)]
Bedding: TypeAlias = Annotated[float, _BEDDING]
LineStiffness: TypeAlias = Annotated[float, _LINE_STIFFNESS]
PositiveLineStiffness: TypeAlias = Annotated[float, _positive(_LINE_STIFFNESS)]
LineDensity: TypeAlias = Annotated[float, _LINE_DENSITY]
Frequency: TypeAlias = Annotated[float, _FREQUENCY]
PositiveFrequency: TypeAlias = Annotated[float, _positive(_FREQUENCY)]
Cents: TypeAlias = Annotated[float, _CENTS]
PositiveCents: TypeAlias = Annotated[float, _positive(_CENTS)]
VaryingArealDensity: TypeAlias = Annotated[Amount, _varying(_AREAL_DENSITY)]
PositiveVaryingArealDensity: TypeAlias = Annotated[Amount, _varying(_positive(_AREAL_DENSITY))]
VaryingLineTension: TypeAlias = Annotated[Amount, _varying(_LINE_TENSION)]
PositiveVaryingLineTension: TypeAlias = Annotated[Amount, _varying(_positive(_LINE_TENSION))]
VaryingBedding: TypeAlias = Annotated[Amount, _varying(_BEDDING)]
VaryingLineDensity: TypeAlias = Annotated[Amount, _varying(_LINE_DENSITY)]
VaryingLineStiffness: TypeAlias = Annotated[Amount, _varying(_LINE_STIFFNESS)]
# an edge may be elastic along a part of it alone
PositiveVaryingLineStiffness: TypeAlias = Annotated[
    Amount, replace(_positive(_LINE_STIFFNESS), varying=Sign.NOT_NEGATIVE)
]
Density: TypeAlias = Annotated[float, _DENSITY]
PositiveDensity: TypeAlias = Annotated[float, _positive(_DENSITY)]
Pressure: TypeAlias = Annotated[float, _PRESSURE]
File: TypeAlias = Annotated[Path, _File()]
