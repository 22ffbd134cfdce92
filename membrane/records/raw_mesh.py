"""The raw mesh: straight triangles that know which kernel curves their sides follow."""

from __future__ import annotations

from dataclasses import dataclass

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class RawMesh:
    """A conforming mesh of straight triangles, as the kernel makes it.

    vertices : (2, n_vertices), metres
    triangles : (3, n_triangles), counter-clockwise
    face : (n_triangles,), tag of the kernel surface that each triangle lies on
    segments : (2, n_segments), vertex pairs along the kernel's curves
    segment_curve : (n_segments,), tag of the kernel curve of each segment
    segment_parameters : (2, n_segments), the curve's parameter at the two ends; on a
        closed curve the seam has the first or the last parameter, whichever is next
        to the other end
    """

    vertices: Floats
    triangles: Ints
    face: Ints
    segments: Ints
    segment_curve: Ints
    segment_parameters: Floats

    @property
    def size(self) -> int:
        """How many triangles there are."""
        return int(self.triangles.shape[1])

    @property
    def areas(self) -> Floats:
        """(n_triangles,), square metres, of the straight triangles; positive."""
        return signed_areas(self.vertices[:, self.triangles])


def signed_areas(corners: Floats) -> Floats:
    """Areas (n,) of triangles with ``corners`` (2, 3, n), positive counter-clockwise."""
    (x0, x1, x2), (y0, y1, y2) = corners
    areas: Floats = 0.5 * ((x1 - x0) * (y2 - y0) - (x2 - x0) * (y1 - y0))
    return areas
