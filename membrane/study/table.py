"""A table of the study: its keys, its path, and what has been understood of it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, TypeVar

from membrane.errors import StudyError
from membrane.plugins.options import plain, read_options
from membrane.study.problems import Problems, joined
from membrane.wording import shown

T = TypeVar("T")


@dataclass
class Table:
    """A table at a path; readers note its problems and collect its resolved values.

    resolved : the same table as plain data in SI numbers, filled as it is read
    """

    keys: Mapping[str, Any]
    path: str
    problems: Problems
    resolved: dict[str, Any] = field(default_factory=dict)

    def refuse(self, key: str, sentence: str) -> None:
        """Note that something is wrong with a key of this table."""
        self.problems.add(joined(self.path, key), sentence)

    def read(
        self,
        kind: type[T],
        keys: Mapping[str, Any],
        beside: Sequence[str] = (),
        base: Path | None = None,
    ) -> T | None:
        """A dataclass from some of the keys; None where one of them is wrong.

        beside : the other keys that the table may have
        base : the folder that relative paths of files start from
        """
        try:
            found = read_options(kind, keys, beside, base)
        except StudyError as error:
            self.problems.add_all(self.path, error.problems)
            return None
        self.resolved.update(plain(found))
        return found

    def read_all(self, kind: type[T]) -> T | None:
        """A dataclass from all keys of the table."""
        return self.read(kind, self.keys)

    def without(self, *keys: str) -> dict[str, Any]:
        """The keys but for some that are read in another way."""
        return {key: value for key, value in self.keys.items() if key not in keys}

    def only(self, keys: tuple[str, ...]) -> dict[str, Any]:
        """Some of the keys, where they are given."""
        return {key: value for key, value in self.keys.items() if key in keys}

    def table(self, key: str) -> Table | None:
        """The table at a key, empty where it is not given; None where it is no table."""
        return self._inner(key, self.keys.get(key, {}))

    def tables(self) -> Iterator[tuple[str, Table]]:
        """The tables of a table of tables, by name."""
        for name in self.keys:
            inner = self.table(name)
            if inner is not None:
                yield name, inner

    def array(self, key: str) -> list[Table]:
        """The tables of an array of tables, each under its name, or its place from 1."""
        items = self.keys.get(key, [])
        if not isinstance(items, list | tuple):
            self.refuse(key, f"expected an array of tables, [[{key}]], got {shown(items)}.")
            return []
        inner = [self._item(key, place, item) for place, item in enumerate(items, 1)]
        tables = [table for table in inner if table is not None]
        if items:
            self.resolved[key] = [table.resolved for table in tables]
        return tables

    def _inner(self, key: str, value: Any) -> Table | None:
        if not isinstance(value, Mapping):
            self.refuse(key, f"expected a table, [{joined(self.path, key)}], got {shown(value)}.")
            return None
        resolved = self.resolved.setdefault(key, {})
        return Table(value, joined(self.path, key), self.problems, resolved)

    def _item(self, key: str, place: int, item: Any) -> Table | None:
        if not isinstance(item, Mapping):
            self.refuse(f"{key}[{place}]", f"expected a table, [[{key}]], got {shown(item)}.")
            return None
        name = item.get("name")
        path = f"{key}.{name}" if isinstance(name, str) and name else f"{key}[{place}]"
        return Table(item, joined(self.path, path), self.problems)
