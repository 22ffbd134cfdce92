"""The units that studies are usually written in, as pint reads them, without loading pint."""

from __future__ import annotations

_ROOTS = {
    "meter": {
        **dict.fromkeys(("m", "meter", "metre"), 1.0),
        **dict.fromkeys(("mm", "millimeter", "millimetre"), 0.001),
        **dict.fromkeys(("cm", "centimeter", "centimetre"), 0.01),
        **dict.fromkeys(("um", "µm"), 1e-06),
        **dict.fromkeys(("in", "inch"), 0.0254),
        "ft": 0.30479999999999996,
    },
    "radian": {
        **dict.fromkeys(("rad", "radian"), 1.0),
        **dict.fromkeys(("deg", "degree"), 0.017453292519943295),
    },
    "gram": {**dict.fromkeys(("kg", "kilogram"), 1000.0), **dict.fromkeys(("g", "gram"), 1.0)},
    "gram * meter / second ** 2": {
        **dict.fromkeys(("N", "newton"), 1000.0),
        "kN": 1000000.0,
        "mN": 1.0,
        "lbf": 4448.221615260501,
    },
    "1 / second": {
        **dict.fromkeys(("Hz", "hertz"), 1.0),
        **dict.fromkeys(("kHz", "kilohertz"), 1000.0),
    },
    "cent": {"cent": 1.0, "cents": 1.0},
    "gram / meter / second ** 2": {"Pa": 1000.0, "kPa": 1000000.0, "N/m^2": 1000.0},
    "gram / meter ** 2": {"kg/m^2": 1000.0, "g/m^2": 1.0, "kg/m²": 1000.0, "g/m²": 1.0},
    "gram / meter": {"kg/m": 1000.0, "g/m": 1.0},
    "gram / second ** 2": {"N/m": 1000.0, "kN/m": 1000000.0, "N/mm": 1000000.0},
    "gram / meter ** 2 / second ** 2": {"N/m^3": 1000.0},
    "gram / meter ** 3": {"kg/m^3": 1000.0},
}

COMMON_UNITS = {
    spelling: (factor, root) for root, units in _ROOTS.items() for spelling, factor in units.items()
}
"""Spelling -> factor and name of the root unit, with all the digits of pint's own floats."""
