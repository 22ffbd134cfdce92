"""From a study to its outline: shapes drawn, placed, cut and named."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

from membrane.kernel import Kernel
from membrane.outline.curves import check_lines, check_loads, curves
from membrane.outline.cut import Cut, cut
from membrane.outline.names import names
from membrane.outline.place import Placed, place
from membrane.outline.samples import samples
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
    points = (*_kinks(study), *known.corners)
    pieces = cut(kernel, outline.surface, _faces(patches), _faces(holes), points, known.cuts)
    named = curves(kernel, pieces, known)
    check_lines(kernel, known, named)
    check_loads(study, named)
    check_whole(kernel, named, pieces.patches)
    check_slivers(kernel, named, pieces.patches)
    kernel.keep_only(pieces.patches)
    notes = (*_notes(outline, patches, holes), *_of_functions(study))
    head = Outline(_regions(kernel, pieces, bool(known.breaks)), named, notes)
    return replace(head, samples=samples(kernel, head)) if study.functions or study.terms else head


def _placed(kernel: Kernel, shapes: Iterable[Patch | Hole]) -> dict[str, Placed]:
    return {shape.name: place(kernel, shape.shape) for shape in shapes}


def _faces(shapes: Mapping[str, Placed]) -> dict[str, int]:
    return {name: placed.surface for name, placed in shapes.items()}


def _notes(outline: Placed, *shapes: Mapping[str, Placed]) -> tuple[str, ...]:
    """What the plugins said about the shapes they drew, each sentence once."""
    every = [outline, *(placed for named in shapes for placed in named.values())]
    return tuple(dict.fromkeys(note for placed in every for note in placed.notes))


def _of_functions(study: Study) -> tuple[str, ...]:
    return tuple(dict.fromkeys(note for function in study.functions for note in function.notes))


def _kinks(study: Study) -> tuple[tuple[float, float], ...]:
    """Where a coefficient is not smooth, (x, y), metres, each place once."""
    places = (place for f in study.functions for place in f.places_of_kinks.T)
    return tuple(dict.fromkeys((float(x), float(y)) for x, y in places))


def _regions(kernel: Kernel, pieces: Cut, apart: bool) -> tuple[Region, ...]:
    """The regions, from the head up.

    apart : each face is a region of its own, as a coefficient may jump from one to the next
    """
    faces: dict[tuple[str, ...], list[int]] = {}
    for face, patches in sorted(pieces.patches.items(), key=lambda item: (len(item[1]), item[0])):
        faces.setdefault(patches, []).append(face)
    regions = []
    for patches, tags in faces.items():
        for k, some in enumerate([[tag] for tag in tags] if apart else [tags], 1):
            name = ("+".join(patches) or HEAD) + (f".{k}" if k > 1 else "")
            regions.append(Region(name, patches, tuple(some), sum(map(kernel.area, some))))
    return tuple(regions)
