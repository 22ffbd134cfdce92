"""Quantities: what a text with a unit is in SI, and what is said where it is none."""

from __future__ import annotations

import subprocess
import sys
from contextlib import suppress
from math import inf, nan, pi
from pathlib import Path
from typing import get_args

import numpy as np
import pint
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from membrane import units
from membrane.units import Quantity

unhurried = settings(deadline=None)  # the first unit read loads pint


def read(annotated, value):
    """What pydantic would make of a value for a field of that type."""
    quantity = get_args(annotated)[1]
    assert isinstance(quantity, Quantity)
    return quantity.read(value)


def refusal(annotated, value) -> str:
    with pytest.raises(ValueError, match=r".") as caught:
        read(annotated, value)
    return str(caught.value)


# Definitions: inch 0.0254 m, pound-force 4.4482216152605 N, foot 0.3048 m (NIST SP 811, App. B).
@pytest.mark.parametrize(
    ("kind", "text", "expected"),
    [
        (units.Length, "356 mm", 0.356),
        (units.Length, "14 in", 0.3556),
        (units.Length, "14inch", 0.3556),
        (units.Length, "-1.5e1 cm", -0.15),
        (units.Length, "+.5 ft", 0.1524),
        (units.Length, "10 µm", 1e-5),
        (units.Length, "0 m", 0.0),
        (units.LineTension, "3 kN/m", 3000.0),
        (units.LineTension, "2 N/mm", 2000.0),
        (units.LineTension, "1 lbf/ft", 4.4482216152605 / 0.3048),
        (units.ArealDensity, "0.26 kg/m^2", 0.26),
        (units.ArealDensity, "260 g/m²", 0.26),
        (units.ArealDensity, "260 g m**-2", 0.26),
        (units.Bedding, "1e5 N/m^3", 1e5),
        (units.LineStiffness, "20 kN/m^2", 2e4),
        (units.LineDensity, "20 g/m", 0.02),
        (units.Frequency, "0.8 kHz", 800.0),
        (units.Cents, "0.01 cent", 0.01),
        (units.Cents, "3 cents", 3.0),
        (units.Angle, "180 deg", pi),
        (units.Angle, "360°", 2 * pi),
        (units.Angle, "-1.5 rad", -1.5),
        (units.Density, "1.39 g/cm^3", 1390.0),
        (units.Pressure, "101 kPa", 101e3),
    ],
)
def test_text_with_a_unit(kind, text, expected):
    assert read(kind, text) == pytest.approx(expected, rel=1e-15, abs=0.0)


@pytest.mark.parametrize("value", [2, 2.0, np.float64(2), np.float32(2), np.int64(2)])
def test_bare_numbers_are_si(value):
    found = read(units.Length, value)
    assert found == 2.0
    assert type(found) is float


@unhurried
@given(st.integers(min_value=1, max_value=10**6))
def test_millimetres_are_the_same_number_as_their_metres_written_out(millimetres):
    metres = float(f"{millimetres // 1000}.{millimetres % 1000:03d}")
    assert read(units.Length, f"{millimetres} mm") == metres


@unhurried
@given(
    st.floats(min_value=1e-6, max_value=1e6),
    st.sampled_from(["mm", "cm", "inch", "ft", "yard", "mile", "angstrom"]),
)
def test_lengths_agree_with_pints_own_conversion(value, unit):
    expected = pint.get_application_registry().Quantity(value, unit).to("m").magnitude
    assert read(units.Length, f"{value!r} {unit}") == pytest.approx(expected, rel=1e-15)


@pytest.mark.parametrize(
    ("kind", "value", "said"),
    [
        (units.Length, "3 kg", 'expected a length such as "356 mm", got "3 kg".'),
        (units.PositiveLength, "0 mm", 'a positive length such as "356 mm", got "0 mm".'),
        (units.PositiveLength, -1.0, 'a positive length such as "356 mm", got -1.0.'),
        (units.ArealDensity, "-1 kg/m^2", "expected an areal density of zero or more such as"),
        (units.Length, "3", 'got "3", which has no unit.'),
        (units.Length, "3 millimeters mm", 'got "3 millimeters mm".'),
        (units.Length, "3 milimeter", 'whose unit is unknown; did you mean "millimeter"?'),
        (units.LineTension, "3 KN/m", 'whose unit is unknown; did you mean "kN/m"?'),
        (units.Length, "3 kg/(m", 'whose unit is unknown; did you mean "kg/m"?'),
        (units.Length, "three mm", 'got "three mm".'),
        (units.Length, "", 'got "".'),
        (units.Length, True, "got true."),
        (units.Length, None, "got None."),
        (units.Length, [1.0], "got a list of 1."),
        (units.Length, {"mm": 3}, "got a table."),
        (units.Length, 1 + 2j, "got (1+2j)."),
        (units.Length, inf, "got inf, which is not finite."),
        (units.Length, nan, "got nan, which is not finite."),
        (units.Length, "1e999999999 mm", "which is not finite."),
        (units.Length, "9e307 mile", "which is not finite."),
        (units.Frequency, "800 rpm", 'got "800 rpm".'),
        (units.Frequency, "800 rad/s", 'got "800 rad/s".'),
        (units.Angle, "30 percent", 'expected an angle such as "30 deg", got "30 percent".'),
        (units.Angle, 30, 'an angle within one turn, got 30; write "30 deg".'),
        (units.Angle, "361 deg", 'an angle within one turn, got "361 deg".'),
        (units.Cents, "0.01 Hz", 'expected an interval such as "0.01 cent", got "0.01 Hz".'),
        (units.ArealDensity, "0,26 kg/m^2", 'got "0,26 kg/m^2"; write "0.26 kg/m^2".'),
        (units.LineTension, "1,000 N/m", 'write "1.000 N/m" or "1000 N/m".'),
        (units.Length, '14"', 'write "14 in".'),
        (units.Length, "14 ″", 'write "14 in".'),
        (units.Length, "1.5'", 'write "1.5 ft".'),
        (units.UnitOfLength, "kg", 'expected a unit of length such as "mm", got "kg".'),
        (units.UnitOfLength, "cmm", 'got "cmm", whose unit is unknown; did you mean "mm"?'),
        (units.Length, {"formula": "r"}, "cannot vary over the head"),
    ],
)
def test_what_is_refused(kind, value, said):
    assert said in refusal(kind, value)


def test_the_smallest_number_is_soon_read():
    assert read(units.Length, "1e-999999999 mm") == 0.0


@unhurried
@given(st.text(alphabet="mkgNin/^*() .2-·°9e_@", max_size=60))
def test_any_unit_gives_a_number_or_a_sentence(unit):
    with suppress(ValueError):  # any other error fails the test
        assert isinstance(read(units.Length, f"3 {unit}"), float)


def test_a_long_unit_is_soon_refused():
    """The pattern of a unit must not try every way to split a word."""
    assert "unknown" in refusal(units.Length, "3 " + "m" * 58 + "@")


UNWRITABLE = """
import sys
from membrane.units import _LENGTH
assert _LENGTH.read(0.5) == 0.5
assert "pint" not in sys.modules, "pint is loaded for a bare number"
print(_LENGTH.read("14 in"))
"""


@pytest.mark.parametrize("cache", ["/proc/nowhere", "{tmp}/spoilt"])
def test_units_without_a_sound_cache(tmp_path, cache):
    """Neither a cache that cannot be written nor one that is spoilt changes a unit."""
    place = Path(cache.format(tmp=tmp_path))
    environment = {"XDG_CACHE_HOME": str(place), "PATH": "", "HOME": str(place)}
    command = [sys.executable, "-c", UNWRITABLE]
    for _ in range(2):
        done = subprocess.run(command, env=environment, capture_output=True, text=True)
        assert (done.stdout, done.stderr) == ("0.3556\n", "")
        for file in place.rglob("*.pickle"):
            file.write_bytes(file.read_bytes()[:100])


@pytest.mark.parametrize("unit", units.COMMON_UNITS)
def test_common_units_are_pints_to_the_last_bit(unit):
    assert units.COMMON_UNITS[unit] == units._root_by_pint(unit)


def test_common_units_do_not_load_pint():
    code = (
        "import sys; from membrane.units import _AREAL_DENSITY as density\n"
        "density.read('260 g/m^2'); assert 'pint' not in sys.modules\n"
        "density.read('1 kg/yd^2'); assert 'pint' in sys.modules\n"
    )
    assert subprocess.run([sys.executable, "-c", code]).returncode == 0
