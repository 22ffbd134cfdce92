"""From a study to its outline: shapes drawn, placed, cut and named."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from membrane.kernel import Kernel
from membrane.outline.curves import check_lines, curves
from membrane.outline.cut import Cut, cut
from membrane.outline.names import names
from membrane.outline.place import Placed, place
from membrane.outline.soundness import check_slivers, check_whole
from membrane.records.outline import HEAD, Outline, Region
from membrane.records.study import Hole, Patch, Study


def draw(kernel: Kernel, study: Study) -> Outline:
    """Draw a study's outline with all that lies on it in an open kernel session.

    Raises OutlineError for shapes that do not fit together.
    """
    outline = place(kernel, study.outline)
    patches, holes = _placed(kernel, study.patches), _placed(kernel, study.holes)
    known = names(kernel, study, outline, holes)
    corners = [point for split in known.splits.values() for point in split.points()]
    pieces = cut(kernel, outline.surface, _faces(patches), _faces(holes), known.cuts, corners)
    named = curves(kernel, pieces, known)
    check_lines(kernel, known, named)
    check_whole(kernel, named, pieces.patches)
    check_slivers(kernel, named, pieces.patches)
    kernel.keep_only(pieces.patches)
    return Outline(_regions(kernel, pieces), named)


def _placed(kernel: Kernel, shapes: Iterable[Patch | Hole]) -> dict[str, Placed]:
    return {shape.name: place(kernel, shape.shape) for shape in shapes}


def _faces(placed: Mapping[str, Placed]) -> dict[str, int]:
    return {name: shape.surface for name, shape in placed.items()}


def _regions(kernel: Kernel, pieces: Cut) -> tuple[Region, ...]:
    faces: dict[tuple[str, ...], list[int]] = {}
    for face, patches in sorted(pieces.patches.items(), key=lambda item: (len(item[1]), item[0])):
        faces.setdefault(patches, []).append(face)
    return tuple(
        Region("+".join(patches) or HEAD, patches, tuple(tags), sum(map(kernel.area, tags)))
        for patches, tags in faces.items()
    )
