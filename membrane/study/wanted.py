"""What is wanted: which modes, which products, and which further terms apply."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from membrane import plugins
from membrane.errors import PluginError
from membrane.records.study import ModesWanted, ProductsWanted
from membrane.study.problems import NOT_YET
from membrane.study.table import Table
from membrane.units import PositiveCents, PositiveFrequency
from membrane.wording import shown

SMALLEST_ACCURACY = 1e-7
"""Cents; what rounding leaves uncertain in an eigenvalue is about this."""

DEGREES = (4, 12)
"""Lowest degree whose error a solve two degrees lower can tell, and the highest there is."""

_DEFAULT = ModesWanted()
_PRODUCTS_LATER = ("report", "sound")


@dataclass(frozen=True)
class _ModesKeys:
    count: int | None = None
    up_to: PositiveFrequency | None = None
    accuracy: PositiveCents = _DEFAULT.accuracy
    bracket: bool = _DEFAULT.bracket
    degree: int | None = None
    eigensolver: str = _DEFAULT.eigensolver
    ratio_to: int | None = None
    reference_pitch: PositiveFrequency = _DEFAULT.reference_pitch


@dataclass(frozen=True)
class _ProductsKeys:
    write: tuple[str, ...] = ProductsWanted().write


def read_modes(table: Table) -> ModesWanted | None:
    """The table ``modes``."""
    keys = table.read_all(_ModesKeys)
    if keys is None:
        return None
    _check_modes(table, keys)
    _find(table, "eigensolver", "eigensolver", keys.eigensolver)
    count = _DEFAULT.count if keys.count is None else keys.count
    if keys.up_to is None:
        table.resolved["count"] = count
    return ModesWanted(
        count=count,
        up_to=keys.up_to,
        accuracy=keys.accuracy,
        bracket=keys.bracket,
        degree=keys.degree,
        eigensolver=keys.eigensolver,
        ratio_to=keys.ratio_to,
        reference_pitch=keys.reference_pitch,
    )


def read_products(table: Table) -> ProductsWanted | None:
    """The table ``products``: names to write, and a table of options for each."""
    keys = table.read(_ProductsKeys, table.only(("write",)))
    if keys is None:
        return None
    for name in keys.write:
        _check_product(table, name, keys.write)
    for name in table.without("write"):
        if name not in keys.write:
            table.refuse(name, f"is not written; add {shown(name)} to products.write.")
    found = {name: _options(table, "product", name) for name in dict.fromkeys(keys.write)}
    return ProductsWanted(keys.write, found)


def read_terms(table: Table) -> dict[str, Any]:
    """The tables ``terms.*``: frozen options by the name of the term."""
    found = {}
    for name in table.keys:
        if name in _own_terms():
            table.refuse(name, "always applies and has no table; leave this one out.")
        else:
            found[name] = _options(table, "term", name)
    return found


def _check_modes(table: Table, keys: _ModesKeys) -> None:
    if keys.count is not None and keys.up_to is not None:
        table.refuse("count", "give either count or up_to, not both.")
    if keys.count is not None and keys.count < 1:
        table.refuse("count", f"expected at least 1 mode, got {keys.count}.")
    if keys.accuracy < SMALLEST_ACCURACY:
        table.refuse(
            "accuracy",
            f"{keys.accuracy:g} cent is below what rounding leaves certain; "
            f"give {SMALLEST_ACCURACY:g} cent or more.",
        )
    low, high = DEGREES
    if keys.degree is not None and not low <= keys.degree <= high:
        table.refuse("degree", f"expected a degree from {low} to {high}, got {keys.degree}.")
    _check_ratio(table, keys)


def _check_ratio(table: Table, keys: _ModesKeys) -> None:
    if keys.ratio_to is None:
        return
    count = keys.count or _DEFAULT.count
    if keys.ratio_to < 1:
        table.refuse("ratio_to", f"expected the number of a mode, from 1, got {keys.ratio_to}.")
    elif keys.up_to is None and keys.ratio_to > count:
        table.refuse("ratio_to", f"mode {keys.ratio_to} is not among the {count} modes wanted.")


def _check_product(table: Table, name: str, write: Sequence[str]) -> None:
    if write.count(name) > 1:
        table.refuse("write", f"{shown(name)} is named twice.")
    if name in _PRODUCTS_LATER and name not in plugins.names("product"):
        table.refuse("write", f"the product {shown(name)} is {NOT_YET}; leave it out.")
    else:
        _find(table, "write", "product", name)


def _find(table: Table, key: str, kind: str, name: str) -> bool:
    """Whether a plugin is known; where it is not, that is noted."""
    try:
        plugins.find(kind, name)
    except PluginError as error:
        table.refuse(key, str(error))
        return False
    return True


def _options(table: Table, kind: str, name: str) -> Any:
    """Options of a known plugin from its table."""
    inner = table.table(name)
    if inner is None or name not in plugins.names(kind):
        if kind == "term":
            _find(table, name, kind, name)
        return None
    try:
        return inner.read_all(plugins.load(kind, name).Options)
    except PluginError as error:
        table.refuse(name, str(error))
        return None


def _own_terms() -> tuple[str, ...]:
    return tuple(
        name
        for name, plugin in plugins.registered("term").items()
        if plugin.package == plugins.OWN_PACKAGE
    )
