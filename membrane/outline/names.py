"""What the curves of a head were drawn as: edges and their parts, line loads, slits."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass

from membrane.kernel import Kernel
from membrane.outline.breaks import break_curves
from membrane.outline.copies import Copy, copies
from membrane.outline.parts import Split
from membrane.outline.place import Placed, place
from membrane.records.study import EdgePart, Study


@dataclass(frozen=True)
class Names:
    """Loose copies of everything drawn, by what it is drawn as.

    edges : copies of the outline's edges
    holes : name of a hole -> copies of its border
    splits : name of an edge or of a hole -> how it is split
    lines : copies of the line loads
    slits : names of the left and the right lip -> copies of the slit
    breaks : the kernel's curves along jumps and kinks of coefficients; nameless
    """

    edges: Sequence[Copy]
    holes: Mapping[str, Sequence[Copy]]
    splits: Mapping[str, Split]
    lines: Sequence[Copy]
    slits: Mapping[tuple[str, str], Sequence[Copy]]
    breaks: Sequence[int] = ()

    @property
    def order(self) -> dict[str, int]:
        """Every edge name with its rank: edges, then their parts, holes, lips."""
        names = dict.fromkeys([*(copy.name for copy in self.edges), *self.holes])
        ranked = [n for name in names for n in (name, *self._parts_of(name))]
        lips = [lip for pair in self.slits for lip in pair]
        return {name: rank for rank, name in enumerate([*ranked, *lips])}

    @property
    def cuts(self) -> list[int]:
        """The curves that cut the head: line loads, slits and breaks."""
        slits = (copy for found in self.slits.values() for copy in found)
        return [copy.tag for copy in (*self.lines, *slits)] + [*self.breaks]

    @property
    def corners(self) -> list[tuple[float, float]]:
        """Where parts of edges begin and end, (x, y), metres."""
        points = (point for split in self.splits.values() for point in split.points())
        return [(float(x), float(y)) for x, y in points]

    def _parts_of(self, edge: str) -> list[str]:
        return [part.name for part in self.splits[edge].parts] if edge in self.splits else []


def names(kernel: Kernel, study: Study, outline: Placed, holes: Mapping[str, Placed]) -> Names:
    """Draw a study's line loads and slits, and note what everything is called."""
    loads = {load.name: place(kernel, load.line).border for load in study.line_loads}
    cuts = {slit.lips: place(kernel, slit.line).border for slit in study.slits}
    kernel.synchronize()
    edges = [copy for name in outline.edges for copy in copies(kernel, name, outline.edges[name])]
    breaks = list(break_curves(kernel, study.functions, edges))
    kernel.synchronize()
    borders = {name: copies(kernel, name, hole.border) for name, hole in holes.items()}
    split = _splits(kernel, study.edge_parts, outline, edges, holes, borders)
    lines = [copy for name, tags in loads.items() for copy in copies(kernel, name, tags)]
    cuts = {**outline.slits, **cuts}
    slits = {lips: copies(kernel, "", tags) for lips, tags in cuts.items()}
    return Names(edges, borders, split, lines, slits, breaks)


def _splits(
    kernel: Kernel,
    parts: Iterable[EdgePart],
    outline: Placed,
    edges: Sequence[Copy],
    holes: Mapping[str, Placed],
    borders: Mapping[str, Sequence[Copy]],
) -> dict[str, Split]:
    by_edge: dict[str, list[EdgePart]] = {}
    for part in parts:
        by_edge.setdefault(part.edge, []).append(part)
    splits = {}
    for name, some in by_edge.items():
        shape = holes[name].shape if name in holes else outline.shape
        edge = borders.get(name) or [copy for copy in edges if copy.name == name]
        splits[name] = Split.of(kernel, some, edge, shape)
    return splits
