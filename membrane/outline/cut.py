"""The head cut by its patches and holes: which faces remain, and what covers each."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations

from membrane.errors import OutlineError
from membrane.kernel import Kernel

# Less than this share of a shape may stick out: rounding where it follows the edge.
_ROUNDING = 1e-7
# Area that a cut may gain or lose, as a share of the outline's.
_LOST = 1e-9
# Square metres; the kernel takes points closer than 1e-7 m for one.
_SMALLEST = 5e-9


@dataclass(frozen=True)
class Cut:
    """The faces after the cut.

    patches : face that remains -> names of the patches over it, lowest first
    holes : face that is cut away -> name of the hole
    """

    patches: Mapping[int, tuple[str, ...]]
    holes: Mapping[int, str]


def cut(
    kernel: Kernel,
    outline: int,
    patches: Mapping[str, int],
    holes: Mapping[str, int],
    points: Sequence[tuple[float, float]] = (),
) -> Cut:
    """Cut an outline's face by the faces of patches and holes.

    points : places (x, y), metres, that become vertices of the mesh where they are on the head
    Raises OutlineError for shapes that do not fit together.
    """
    head, *others = _fragments(kernel, [outline, *patches.values(), *holes.values()], points)
    over = dict(zip(patches, others[: len(patches)], strict=True))
    away = dict(zip(holes, others[len(patches) :], strict=True))
    for name, cover in over.items():
        _check_inside(kernel, f"The patch {name}", cover, head)
    for name, cover in away.items():
        _check_inside(kernel, f"The hole {name}", cover, head)
    _check_apart(kernel, away)
    removed = {face: name for name, cover in away.items() for face in cover}
    _check_left(over, head, removed)
    left = sorted(head - removed.keys())
    return Cut({face: tuple(n for n in over if face in over[n]) for face in left}, removed)


def _fragments(
    kernel: Kernel, faces: Sequence[int], points: Sequence[tuple[float, float]]
) -> list[set[int]]:
    """For each face the faces that cover it after all are cut by each other."""
    areas = [kernel.area(face) for face in faces]
    if len(faces) > 1 and areas[0] < _SMALLEST:
        raise OutlineError(
            f"The outline is too small to be cut by patches and holes: {1e6 * areas[0]:.3g} mm^2; "
            f"the geometry kernel needs {1e6 * _SMALLEST:.3g} mm^2."
        )
    covers = kernel.fragment(faces, points)
    _check_kept(kernel, areas, covers)
    return covers


def _area(kernel: Kernel, faces: set[int]) -> float:
    return sum(kernel.area(face) for face in sorted(faces))


def _check_kept(kernel: Kernel, areas: Sequence[float], covers: Sequence[set[int]]) -> None:
    """A cut moves no area; where it does, the kernel has failed without saying so."""
    for area, cover in zip(areas, covers, strict=True):
        if abs(_area(kernel, cover) - area) > _LOST * areas[0]:
            raise OutlineError(
                "The shapes could not be cut by each other exactly; "
                "move apart or leave out shapes that all but touch or are finer than 1 µm."
            )


def _check_inside(kernel: Kernel, shape: str, cover: set[int], head: set[int]) -> None:
    whole, outside = _area(kernel, cover), _area(kernel, cover - head)
    if not cover & head:
        raise OutlineError(f"{shape} lies wholly outside the outline; move it onto the head.")
    if outside > _ROUNDING * whole:
        raise OutlineError(
            f"{shape} reaches over the edge of the outline by {1e6 * outside:.3g} mm^2 "
            f"({outside / whole:.2%} of it); move it inwards or make it smaller."
        )


def _check_apart(kernel: Kernel, holes: Mapping[str, set[int]]) -> None:
    for (one, first), (other, second) in combinations(holes.items(), 2):
        if first & second:
            shared = 1e6 * _area(kernel, first & second)
            raise OutlineError(
                f"The holes {one} and {other} overlap by {shared:.3g} mm^2; "
                "move them apart or draw them as one hole."
            )


def _check_left(
    patches: Mapping[str, set[int]], head: set[int], removed: Mapping[int, str]
) -> None:
    if not head - removed.keys():
        raise OutlineError("The holes leave nothing of the head; make them smaller.")
    for name, cover in patches.items():
        if not cover - removed.keys():
            holes = " and ".join(sorted({removed[face] for face in cover}))
            raise OutlineError(
                f"Nothing is left of the patch {name} within {holes}; "
                "leave the patch out or move it."
            )
