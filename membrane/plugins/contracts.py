"""What a plugin of each kind must do; ours and anyone's run these checks in their tests.

Each check raises PluginError with one sentence where the plugin breaks its contract.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import fields, is_dataclass
from pathlib import Path
from typing import Any

import numpy as np

from membrane.errors import PluginError
from membrane.plugins.options import plain, read_options
from membrane.records.function import Function
from membrane.records.membrane import Contribution, Field, OwnForm
from membrane.records.outline import Drawing, Outline
from membrane.records.spectrum import Spectrum
from membrane.records.study import Study

STUDY_KEYS = frozenset(
    (
        *("name", "shape", "script", "at", "rotate", "areal_density", "added_density", "tension"),
        *("bedding", "support", "stiffness", "mass", "line_density", "line_stiffness"),
        *("left", "right"),
    )
)
"""Keys that stand beside a shape's own in the study file, so no outline may have them."""

_ON_EDGES = (Field.EDGE_STIFFNESS, Field.EDGE_MASS)
_ON_LINES = (Field.LINE_STIFFNESS, Field.LINE_MASS)
_TOLERANCE = 1e-9


def check_outline(module: Any, options: Any, kernel: Any = None) -> None:
    """An outline's options and edge names; with an open Kernel, its drawing as well."""
    _check_options(module, options)
    clash = STUDY_KEYS & {field.name for field in fields(module.Options)}
    _must(not clash, f"its options {sorted(clash)} are keys of the study file itself; rename them")
    names = module.edges(options)
    _must(isinstance(names, tuple) and names, "edges(options) must be a tuple of names")
    _must(len(set(names)) == len(names), f"edges(options) names an edge twice: {names}")
    _must(all(isinstance(name, str) and name for name in names), "an edge's name must be a text")
    if kernel is not None:
        drawing = module.build(kernel.geometry, options)
        _check_drawing(drawing, names, kernel, getattr(module, "OPEN", False))


def check_term(module: Any, study: Study, options: Any, outline: Outline) -> None:
    """A term's options, and what it contributes to a study on its outline."""
    _check_options(module, options)
    found = module.contribute(study, options, outline)
    _must(isinstance(found, Iterable), "contribute must hand back contributions")
    for part in found:
        _must(isinstance(part, Contribution | OwnForm), f"contribute handed back {part!r}")
        _check_part(part, outline)


def check_eigensolver(module: Any) -> None:
    """An eigensolver against pencils whose eigenvalues are known in closed form."""
    _check_docstring(module)
    held, stiff = _chain(40, free=False), _chain(40, free=True)
    for (K, M, exact), shift in ((held, 0.0), (stiff, -0.1)):
        values, vectors = module.solve(K, M, 6, shift)
        _must(np.shape(values) == (6,), f"solve must hand back (6,) values, not {np.shape(values)}")
        _must(
            np.shape(vectors) == (40, 6),
            f"solve must hand back (40, 6) vectors, not {np.shape(vectors)}",
        )
        off = np.abs(values - exact[:6]).max() / exact[5]
        _must(off < _TOLERANCE, f"the lowest eigenvalues are off by {off:.1e}")
        wrong = np.abs(K @ vectors - M @ vectors * values).max()
        largest = np.abs(K).max() * np.abs(vectors).max()
        _must(wrong < _TOLERANCE * largest, "K u = lambda M u does not hold")
        again = module.solve(K, M, 6, shift)[1]
        _must(np.array_equal(again, vectors), "the same pencil gives other vectors the second time")


def check_product(module: Any, spectrum: Spectrum, folder: Path, options: Any = None) -> None:
    """A product writes into the folder and leaves the spectrum as it was."""
    options = module.Options() if options is None else options
    _check_options(module, options)
    vectors, earlier = spectrum.modes.vectors.copy(), set(folder.rglob("*"))
    module.write(spectrum, folder, options)
    _must(np.array_equal(vectors, spectrum.modes.vectors), "write must not change the spectrum")
    _must(set(folder.rglob("*")) != earlier, "write must leave a file in the folder")


def _must(holds: Any, sentence: str) -> None:
    if not holds:
        raise PluginError(f"The plugin breaks its contract: {sentence}.")


def _check_docstring(module: Any) -> None:
    first = (module.__doc__ or "").strip().splitlines()[:1]
    _must(first and first[0].strip(), "the module's docstring must open with one sentence of help")


def _check_options(module: Any, options: Any) -> None:
    """Options are frozen, and the study file can write them down and read them again."""
    _check_docstring(module)
    kind = module.Options
    frozen = is_dataclass(kind) and getattr(kind, "__dataclass_params__").frozen  # noqa: B009
    _must(frozen, "Options must be a frozen dataclass")
    _must(isinstance(options, kind), f"{options!r} is not an instance of the plugin's Options")
    again = read_options(kind, plain(options))
    _must(again == options, f"the study file would read {options!r} as {again!r}")


def _check_drawing(drawing: Any, names: tuple[str, ...], kernel: Any, is_open: bool) -> None:
    _must(isinstance(drawing, Drawing), "build must hand back a Drawing")
    lips = [lip for slit in drawing.slits for lip in (slit.left, slit.right)]
    drawn = (*drawing.edges, *lips)
    _must(sorted(drawn) == sorted(names), f"build names the edges {drawn}, edges() says {names}")
    if not is_open:
        dim, face = drawing.surface.dim_tag
        _must(dim == 2, "the drawing's surface is not a surface")
        _must(kernel.area(face) > 0.0, "the drawing's surface has no area")
    _must(not is_open or drawing.surface is None, "an open line must have no surface")
    curves = [curve.dim_tag for edge in drawing.edges.values() for curve in edge]
    curves += [slit.curve.dim_tag for slit in drawing.slits]
    _must(all(dim == 1 for dim, _ in curves), "an edge of the drawing is not made of curves")
    _must(len(set(curves)) == len(curves), "a curve of the drawing belongs to two edges")


def _check_part(part: Contribution | OwnForm, outline: Outline) -> None:
    _must(part.key, "a contribution must say the study key that scales it")
    _must(np.isfinite(part.scale), f"the scale of {part.key} is not finite")
    known = tuple(region.name for region in outline.regions)
    if isinstance(part, Contribution) and part.field in _ON_EDGES + _ON_LINES:
        known = outline.edges if part.field in _ON_EDGES else outline.lines
    strange = sorted(set(part.where) - set(known))
    _must(not strange, f"{part.key} lives on {strange}, known are {list(known)}")
    if isinstance(part, OwnForm):
        _must(part.side in ("stiffness", "mass"), f"{part.key} has side {part.side!r}")
    else:
        _check_value(part)


def _check_value(part: Contribution) -> None:
    if isinstance(part.value, Function):
        has, wanted = part.value.tensor is not None, part.field is Field.TENSION
        worded = "with" if has else "without"
        _must(has == wanted, f"the value of {part.key} is a function {worded} a tensor")
        return
    value = np.asarray(part.value, dtype=float)
    shapes = ((), (2, 2)) if part.field is Field.TENSION else ((),)
    _must(value.shape in shapes, f"the value of {part.key} has shape {value.shape}")
    _must(np.isfinite(value).all(), f"the value of {part.key} is not finite")
    _must(np.array_equal(value, value.T), f"the value of {part.key} is not symmetric")


def _chain(size: int, free: bool) -> tuple[Any, Any, Any]:
    """Beads on a string, held or free at the ends: K, M and all eigenvalues.

    Eigenvalues 2 - 2 cos(k pi / (n + 1)), k = 1..n, held; 2 - 2 cos(k pi / n), k = 0..n-1,
    free (standard; e.g. Strang, SIAM Review 41 (1999) 135, from memory); M doubles the mass.
    """
    from scipy.sparse import csc_array

    diagonal = np.full(size, 2.0)
    if free:
        diagonal[[0, -1]] = 1.0
    K = np.diag(diagonal) - np.eye(size, k=1) - np.eye(size, k=-1)
    numbers = np.arange(size) if free else np.arange(1, size + 1)
    exact = 1.0 - np.cos(numbers * np.pi / (size if free else size + 1))
    return csc_array(K), csc_array(2.0 * np.eye(size)), exact
