"""SVG drawings: paths and basic shapes, by id or label, y turned to point up."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace
from math import pi
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import numpy as np

from membrane.drawings.pieces import Affine, Arc, Bezier, Line, Piece
from membrane.drawings.sketch import WHOLE, Sketch, Stroke
from membrane.errors import DrawingError

METRES = {"mm": 1e-3, "cm": 1e-2, "in": 0.0254, "pt": 0.0254 / 72, "pc": 0.0254 / 6, "q": 2.5e-4}
"""Metres of the units that a page's width may have; px says nothing about the true size."""

_PIXELS = {unit: metres / (0.0254 / 96) for unit, metres in METRES.items()} | {"px": 1.0, "": 1.0}
"""User units of a length inside the drawing: CSS's 96 to the inch."""

_LENGTH = re.compile(r"\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*([a-zA-Z]*|%)\s*")
_LABEL = "{http://www.inkscape.org/namespaces/inkscape}label"
_LINK = "{http://www.w3.org/1999/xlink}href"
_GROUPS = ("svg", "g", "a", "switch")
_NOT_DRAWN = (
    *("defs", "symbol", "clipPath", "mask", "pattern", "marker", "style", "title", "desc"),
    *("text", "metadata", "linearGradient", "radialGradient", "filter", "script", "namedview"),
)
_DEEPEST = 50


def read(path: Path) -> Sketch:
    """The curves of an SVG file; nothing outside the file is looked at.

    The origin is the lower left corner of the page where the file has a viewBox, else
    the upper left one. Raises DrawingError where the file cannot be read.
    """
    try:
        root = ElementTree.parse(path).getroot()
        page = _page(root)
        reader = _Reader({e.get("id", ""): e for e in root.iter() if e.get("id")})
        reader.read(root, _Place(_upright(page)))
    except (
        ElementTree.ParseError,
        OSError,
        ValueError,
        KeyError,
        IndexError,
        AttributeError,
    ) as failure:
        raise DrawingError(
            f"{path.name} cannot be read as SVG ({str(failure).rstrip('.')}); export it again."
        ) from failure
    return Sketch({WHOLE: tuple(reader.strokes)}, _unit(root, page), notes=tuple(reader.notes()))


def _page(root: ElementTree.Element) -> tuple[float, ...] | None:
    """x, y, width and height of the viewBox."""
    box = root.get("viewBox")
    if box is None:
        return None
    x, y, width, height = (float(part) for part in re.split(r"[\s,]+", box.strip()))
    return x, y, width, height


def _upright(page: tuple[float, ...] | None) -> Affine:
    x, y, _, height = page or (0.0, 0.0, 0.0, 0.0)
    return Affine.matrix(1.0, 0.0, 0.0, -1.0, -x, y + height)


def _unit(root: ElementTree.Element, page: tuple[float, ...] | None) -> float | None:
    """Metres of one user unit, where width or height has a unit of length.

    A page that is stretched one way keeps its shape by default, and takes the smaller scale.
    """
    scales = []
    for side, place in (("width", 2), ("height", 3)):
        found = _LENGTH.fullmatch(root.get(side, ""))
        metres = METRES.get(found.group(2).lower()) if found else None
        if found and metres and page is None:
            return 0.0254 / 96
        if found and metres and page is not None and page[place] > 0.0:
            scales.append(float(found.group(1)) * metres / page[place])
    return min(scales, default=None)


@dataclass(frozen=True)
class _Place:
    """What an element has from the groups around it: its map and their names, inmost first."""

    affine: Affine
    names: tuple[str, ...] = ()
    depth: int = 0

    def inside(self, element: ElementTree.Element) -> _Place:
        own = tuple(filter(None, (element.get(_LABEL), element.get("id"))))
        affine = _within(self.affine, _transform(element.get("transform", "")))
        return _Place(affine, (*own, *self.names), self.depth + 1)


@dataclass
class _Reader:
    """Strokes met so far, and what was left out."""

    by_id: Mapping[str, ElementTree.Element]
    strokes: list[Stroke] = field(default_factory=list)
    left_out: Counter[str] = field(default_factory=Counter)

    def read(self, element: ElementTree.Element, around: _Place) -> None:
        kind = element.tag.rpartition("}")[2] if isinstance(element.tag, str) else "defs"
        if kind in _NOT_DRAWN or _is_hidden(element):
            return
        if around.depth > _DEEPEST:
            raise ValueError("its elements are nested too deep or refer to themselves")
        place = around.inside(element)
        if kind in _GROUPS:
            for child in element:
                self.read(child, place)
        elif kind == "use":
            self._use(element, place)
        elif kind in _SHAPES:
            name = place.names[0] if place.names else ""
            for piece in _SHAPES[kind](element):
                self.strokes.append(Stroke(name, piece.mapped(place.affine), place.names))
        else:
            self.left_out[kind] += 1

    def _use(self, element: ElementTree.Element, place: _Place) -> None:
        link = element.get(_LINK) or element.get("href") or ""
        target = self.by_id.get(link.removeprefix("#")) if link.startswith("#") else None
        if target is None:
            self.left_out["use of something outside the file"] += 1
            return
        shift = Affine(r=complex(_number(element, "x"), _number(element, "y")))
        self.read(target, replace(place, affine=_within(place.affine, shift)))

    def notes(self) -> Iterator[str]:
        if self.left_out:
            found = ", ".join(f"{count} {kind}" for kind, count in sorted(self.left_out.items()))
            yield f"left out what is no curve: {found}"


def _within(outer: Affine, inner: Affine) -> Affine:
    """First ``inner``, then ``outer``."""
    p = outer.p * inner.p + outer.q * np.conj(inner.q)
    q = outer.p * inner.q + outer.q * np.conj(inner.p)
    return Affine(complex(p), complex(q), complex(outer(inner.r)))


def _transform(text: str) -> Affine:
    if not text.strip():
        return Affine()
    from svgelements import Matrix

    m = Matrix(text)
    return Affine.matrix(*(float(number) for number in (m.a, m.b, m.c, m.d, m.e, m.f)))


def _is_hidden(element: ElementTree.Element) -> bool:
    style = element.get("style", "").replace(" ", "")
    return element.get("display") == "none" or "display:none" in style


def _number(element: ElementTree.Element, key: str, default: float = 0.0) -> float:
    """A length in user units."""
    text = element.get(key)
    if text is None or text.strip() == "auto":
        return default
    found = _LENGTH.fullmatch(text)
    if not found or found.group(2).lower() not in _PIXELS:
        raise ValueError(f'{key} = "{text}" is no length')
    return float(found.group(1)) * _PIXELS[found.group(2).lower()]


def _path(element: ElementTree.Element) -> Iterator[Piece]:
    from svgelements import Path as Segments

    for segment in Segments(element.get("d", "")):
        kind = type(segment).__name__
        if kind in ("Line", "Close") and segment.start is not None and segment.end is not None:
            yield from _side(_complex(segment.start), _complex(segment.end))
        elif kind == "Arc":
            yield from _arc(segment)
        elif kind == "QuadraticBezier":
            yield Bezier(tuple(map(_complex, (segment.start, segment.control, segment.end))))
        elif kind == "CubicBezier":
            points = (segment.start, segment.control1, segment.control2, segment.end)
            yield Bezier(tuple(map(_complex, points)))


def _complex(point: Any) -> complex:
    return complex(float(point.x), float(point.y))


def _side(start: complex, end: complex) -> Iterator[Piece]:
    if start != end:
        yield Line(start, end)


def _arc(segment: Any) -> Iterator[Piece]:
    """The arc between the segment's exact ends; its own centre is only nearly exact.

    In the frame in which the ellipse is a unit circle, the ends fix the centre.
    """
    start, end, rough = (_complex(p) for p in (segment.start, segment.end, segment.center))
    if start == end:
        return
    a, b = _complex(segment.prx) - rough, _complex(segment.pry) - rough
    if abs(a) * abs(b) == 0.0:
        yield Line(start, end)
        return
    turned = Affine.matrix(a.real, a.imag, b.real, b.imag, 0.0, 0.0)
    area = abs(turned.p) ** 2 - abs(turned.q) ** 2
    back = Affine(turned.p.conjugate() / area, -turned.q / area)
    half = 0.5 * complex(back(end - start))
    offset = 1.0 - abs(half) ** 2
    side = 1.0 if (back(rough - start) / half).imag > 0 else -1.0
    is_half = abs(offset) < 1e-9  # of radii that are too small, stretched to fit
    towards = 0.0 if is_half else side * np.sqrt(offset) * 1j * half / abs(half)
    centre = start + complex(turned(half + towards))
    first = float(np.angle(-half - towards))
    turn = (float(np.angle(half - towards)) - first) % (2 * pi)
    sweep = turn if segment.sweep * area > 0 else turn - 2 * pi
    yield Arc(centre, a, b, first, first + sweep)


def _ellipse(element: ElementTree.Element) -> Iterator[Piece]:
    radius = _number(element, "r")
    a, b = _number(element, "rx", radius), _number(element, "ry", radius)
    if a > 0.0 and b > 0.0:
        centre = complex(_number(element, "cx"), _number(element, "cy"))
        yield Arc(centre, complex(a), 1j * b, 0.0, 2 * pi)


def _rect(element: ElementTree.Element) -> Iterator[Piece]:
    x, y, width, height = (_number(element, key) for key in ("x", "y", "width", "height"))
    if width <= 0.0 or height <= 0.0:
        return
    a = _number(element, "rx", _number(element, "ry"))
    b = _number(element, "ry", a)
    a, b = min(a, width / 2), min(b, height / 2)
    if a == 0.0 or b == 0.0:
        a = b = 0.0
    origin = complex(x, y)
    turns = (
        (complex(a, 0), complex(width - a, 0), complex(width - a, b), -pi / 2),
        (complex(width, b), complex(width, height - b), complex(width - a, height - b), 0.0),
        (complex(width - a, height), complex(a, height), complex(a, height - b), pi / 2),
        (complex(0, height - b), complex(0, b), complex(a, b), pi),
    )
    for start, end, centre, first in turns:
        yield from _side(origin + start, origin + end)
        if a > 0.0:
            yield Arc(origin + centre, complex(a), 1j * b, first, first + pi / 2)


def _line(element: ElementTree.Element) -> Iterator[Piece]:
    start, end = (complex(_number(element, f"x{k}"), _number(element, f"y{k}")) for k in (1, 2))
    yield from _side(start, end)


def _polyline(element: ElementTree.Element, closed: bool = False) -> Iterator[Piece]:
    numbers = [
        float(part) for part in re.split(r"[\s,]+", element.get("points", "").strip()) if part
    ]
    corners = [complex(*pair) for pair in zip(numbers[::2], numbers[1::2], strict=True)]
    for start, end in zip(
        corners, corners[1:] + corners[:1] if closed else corners[1:], strict=False
    ):
        yield from _side(start, end)


def _polygon(element: ElementTree.Element) -> Iterator[Piece]:
    yield from _polyline(element, closed=True)


_SHAPES = {
    **{"path": _path, "circle": _ellipse, "ellipse": _ellipse, "rect": _rect},
    **{"line": _line, "polyline": _polyline, "polygon": _polygon},
}
