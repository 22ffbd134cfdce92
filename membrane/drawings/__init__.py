"""Outlines drawn elsewhere: closed contours from DXF, SVG and the meshes of other programs."""

from membrane.drawings.read import Found, find_contour

__all__ = ["Found", "find_contour"]
