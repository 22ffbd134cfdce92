"""The curves of a cut head, each with the names of what runs along it."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Mapping

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline.copies import Copy, Probe, matching, probe, runs_along
from membrane.outline.cut import Cut
from membrane.outline.names import Names
from membrane.records.outline import Curve
from membrane.records.study import Study, Support


def curves(kernel: Kernel, cut: Cut, names: Names) -> tuple[Curve, ...]:
    """Name every curve that bounds a remaining face or ends within one: edges first.

    A curve between a remaining face and a hole bears the hole's name; a curve at one
    remaining face and nothing else, the name of the outline edge that it lies on. The
    kernel's own record of what became of a curve is not reliable after a cut.
    """
    faces = cut.patches
    tags = {t for face in faces for t in (*kernel.border(face), *kernel.inner_curves(face))}
    found = [_named(kernel, cut, names, probe(kernel, tag)) for tag in sorted(tags)]
    order = names.order
    _check_all(names, {name for curve in found for name in curve.edges})
    return tuple(sorted(found, key=lambda curve: (_rank(order, curve), curve.tag)))


def _rank(order: Mapping[str, int], curve: Curve) -> int:
    return min((order[name] for name in curve.edges), default=len(order))


def _named(kernel: Kernel, cut: Cut, names: Names, probed: Probe) -> Curve:
    lines = dict.fromkeys(copy.name for copy in matching(kernel, probed, names.lines))
    curve = Curve(
        tag=probed.tag,
        edge=_edge(kernel, cut, names, probed),
        length=kernel.length(probed.tag),
        lines=tuple(lines),
        lips=_lips(kernel, names, probed),
    )
    _check_lips(curve)
    return curve


def _edge(kernel: Kernel, cut: Cut, names: Names, probed: Probe) -> str | None:
    faces = kernel.neighbours(probed.tag)
    if sum(face in cut.patches for face in faces) == 2:
        return None
    hole = next((cut.holes[face] for face in faces if face in cut.holes), None)
    among = names.edges if hole is None else names.holes[hole]
    copy = next(matching(kernel, probed, among), None)
    if copy is None:
        raise OutlineError(
            "A part of the outline's boundary has no name; "
            "the geometry script must name all of its edges."
        )
    split = names.splits.get(copy.name)
    part = split.part_at(copy, probed.middle) if split else None
    return part or copy.name


def _lips(kernel: Kernel, names: Names, probed: Probe) -> tuple[str, str] | None:
    """The lips to the left and right of a curve along its parameter."""
    found: list[tuple[str, str]] = []
    for (left, right), slit in names.slits.items():
        copy = next(matching(kernel, probed, slit), None)
        if copy is not None:
            found.append((left, right) if runs_along(kernel, probed, copy) else (right, left))
    if len(found) > 1:
        raise OutlineError(
            f"Two slits run along each other, with the lips {found[0][0]} and {found[1][0]}; "
            "draw them as one."
        )
    return found[0] if found else None


def _check_lips(curve: Curve) -> None:
    if curve.lips and curve.edge:
        raise OutlineError(
            f"The slit with the lip {curve.lips[0]} runs along the edge {curve.edge}; "
            "move it inwards."
        )
    if curve.lips and curve.lines:
        raise OutlineError(
            f"The line load {curve.lines[0]} runs along the slit with the lip {curve.lips[0]}; "
            "give the mass to the edges of the slit instead."
        )


def _check_all(names: Names, found: set[str]) -> None:
    for lips in names.slits:
        if not found.intersection(lips):
            slit = lips[0].removesuffix(".left")
            raise OutlineError(
                f"The slit {slit} lies wholly outside the head; move it onto the head."
            )
    for name in names.order:
        if name not in found and name not in names.splits:
            raise OutlineError(
                f"Nothing is left of the edge {name}; move or leave out what cuts it away."
            )


def check_lines(kernel: Kernel, names: Names, found: Iterable[Curve]) -> None:
    """Raise OutlineError where a line load does not lie on the head with all its length."""
    drawn = _lengths(kernel, names.lines)
    left = dict.fromkeys(drawn, 0.0)
    for curve in found:
        for name in curve.lines:
            left[name] += curve.length
    for name, length in drawn.items():
        off = length - left[name]
        if off > _OFF * length:
            wholly = off > (1.0 - _OFF) * length
            where = (
                "wholly outside the head" if wholly else f"outside the head by {1e3 * off:.3g} mm"
            )
            raise OutlineError(
                f"The line load {name} lies {where}; move it onto the head or make it shorter."
            )


def check_loads(study: Study, found: Collection[Curve]) -> None:
    """Raise OutlineError where a line load lies on fixed edges with all its length."""
    for load in study.line_loads:
        edges = {curve.edge for curve in found if load.name in curve.lines}
        if all(edge and study.edge(edge).support is Support.FIXED for edge in edges):
            raise OutlineError(
                f"The line load {load.name} runs along the edge {min(map(str, edges))}, which is "
                "fixed and does not move; leave it out or set another support."
            )


_OFF = 1e-6
"""Share of a line's length that rounding may leave off the head."""


def _lengths(kernel: Kernel, lines: Iterable[Copy]) -> Mapping[str, float]:
    lengths: dict[str, float] = {}
    for copy in lines:
        lengths[copy.name] = lengths.get(copy.name, 0.0) + kernel.length(copy.tag)
    return lengths
