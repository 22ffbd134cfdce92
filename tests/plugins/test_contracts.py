"""Our own plugins keep their contracts, and each breach of a contract is noticed."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from types import SimpleNamespace
from typing import Any

import numpy as np
import pytest

from membrane import plugins, run, study_from
from membrane.coefficients import STANDARD_TERMS
from membrane.errors import PluginError
from membrane.kernel import Kernel
from membrane.plugins.contracts import check_eigensolver, check_outline, check_product, check_term
from membrane.records.function import Function
from membrane.records.membrane import Contribution, Field, OwnForm
from membrane.records.outline import Drawing
from membrane.units import Length
from tests import zoo

OUTLINES = {
    "disc": {"diameter": 0.3},
    "ellipse": {"width": 0.2, "height": 0.3},
    "rectangle": {"width": 0.2, "height": 0.3},
    "polygon": {"corners": ((0.0, 0.0), (1.0, 0.0), (0.0, 1.0))},
    "regular_polygon": {"sides": 7, "radius": 0.2},
    "sector": {"radius": 0.2, "angle": 4.0},
    "stadium": {"straight": 0.2, "width": 0.1},
    "file": {"path": Path(__file__).parents[1] / "drawings" / "files" / "frame_drum.dxf"},
    "rounded_rectangle": {"width": 0.2, "height": 0.3, "radius": 0.05},
    "spline": {"points": ((0.0, 0.0), (1.0, 0.0), (0.0, 1.0))},
    "fourier": {"mean_radius": 0.2, "harmonics": ((3, 0.01, -0.02),)},
}


def test_every_outline_is_checked():
    assert set(OUTLINES) == set(plugins.names("outline"))


@pytest.mark.parametrize("name", OUTLINES)
def test_our_outlines(name):
    module = plugins.load("outline", name)
    with Kernel.session() as kernel:
        check_outline(module, module.Options(**OUTLINES[name]), kernel)


LOADED = {
    **zoo.PATCHED,
    "head": {"areal_density": 1.0, "tension": {"xx": 1.0, "xy": 0.2, "yy": 2.0}, "bedding": 1.0},
    "edges": {"rim": {"support": "elastic", "stiffness": 3.0, "mass": 0.1}},
}


@pytest.mark.parametrize("name", STANDARD_TERMS)
def test_our_terms(name):
    module = plugins.load("term", name)
    with zoo.drawn(LOADED) as (_, study, outline, _):
        assert list(module.contribute(study, module.Options(), outline))
        check_term(module, study, module.Options(), outline)


@pytest.mark.parametrize("name", plugins.names("eigensolver"))
def test_our_eigensolvers(name):
    check_eigensolver(plugins.load("eigensolver", name))


@pytest.fixture(scope="module")
def spectrum():
    return run(study_from({**zoo.DISC, "modes": {"count": 4, "accuracy": 1.0}}))


@pytest.mark.parametrize("name", plugins.names("product"))
def test_our_products(name, spectrum, tmp_path):
    check_product(plugins.load("product", name), spectrum, tmp_path)


def breach(check, *arguments) -> str:
    with pytest.raises(PluginError) as caught:
        check(*arguments)
    return str(caught.value)


@dataclass(frozen=True)
class Options:
    size: Length = 1.0


@dataclass
class Thawed:
    size: Length = 1.0


@dataclass(frozen=True)
class Clashing:
    at: Length = 1.0


@dataclass(frozen=True)
class Untrue:
    """Options that come back from a study file as something else."""

    size: Length = 1.0

    def __post_init__(self) -> None:
        object.__setattr__(self, "size", 2.0 * self.size)


def outline(**changed: Any) -> SimpleNamespace:
    """A sound outline, a disc, but for what is changed."""
    disc = plugins.load("outline", "disc")
    sound = {
        "__doc__": "A disc.",
        "Options": Options,
        "edges": lambda options: ("rim",),
        "build": lambda geometry, options: disc.build(geometry, disc.Options(options.size)),
    }
    return SimpleNamespace(**{**sound, **changed})


@pytest.mark.parametrize(
    ("changed", "options", "said"),
    [
        ({"__doc__": None}, Options(), "docstring must open with one sentence"),
        ({"Options": Thawed}, Thawed(), "must be a frozen dataclass"),
        ({"Options": Clashing}, Clashing(), r"['at'] are keys of the study file itself"),
        ({"Options": Untrue}, Untrue(), "the study file would read"),
        ({}, Thawed(), "is not an instance"),
        ({"edges": lambda options: ()}, Options(), "must be a tuple of names"),
        ({"edges": lambda options: "rim"}, Options(), "must be a tuple of names"),
        ({"edges": lambda options: ("a", "a")}, Options(), "names an edge twice"),
        ({"edges": lambda options: (1,)}, Options(), "name must be a text"),
        ({"edges": lambda options: ("edge",)}, Options(), "build names the edges ('rim',)"),
        ({"build": lambda geometry, options: None}, Options(), "must hand back a Drawing"),
    ],
)
def test_breaches_of_an_outline(changed, options, said):
    with Kernel.session() as kernel:
        assert said in breach(check_outline, outline(**changed), options, kernel)


def test_a_drawing_that_gives_a_curve_to_two_edges():
    def build(geometry: Any, options: Any) -> Drawing:
        shape = geometry.add_polygon([[0, 0], [1, 0], [0, 1]])
        return Drawing(shape, {"a": shape.lines[:2], "b": shape.lines[1:]})

    module = outline(edges=lambda options: ("a", "b"), build=build)
    with Kernel.session() as kernel:
        assert "belongs to two edges" in breach(check_outline, module, Options(), kernel)


def test_a_sound_outline_passes():
    with Kernel.session() as kernel:
        check_outline(outline(), Options(), kernel)


def part(**changed: Any) -> Contribution:
    sound = {"key": "terms.x", "field": Field.TENSION, "where": ("head",), "scale": 1.0}
    return Contribution(**{**sound, **changed})


@pytest.mark.parametrize(
    ("found", "said"),
    [
        ("sand", "contribute handed back 's'"),
        ([part(key="")], "must say the study key"),
        ([part(scale=float("nan"))], "the scale of terms.x is not finite"),
        ([part(where=("rim",))], "lives on ['rim'], known are"),
        ([part(field=Field.EDGE_MASS)], "lives on ['head'], known are ['rim']"),
        ([part(value=np.array([[1.0, 2.0], [0.0, 1.0]]))], "is not symmetric"),
        ([part(value=np.ones(2))], "has shape (2,)"),
        ([part(field=Field.BEDDING, value=np.eye(2))], "has shape (2, 2)"),
        ([part(value=np.inf)], "value of terms.x is not finite"),
        ([part(value=Function({}, max))], "is a function without a tensor"),
        (
            [part(field=Field.BEDDING, value=Function({}, max).times(np.eye(2)))],
            "is a function with a tensor",
        ),
        ([OwnForm("terms.x", "damping", ("head",), 1.0, max)], "has side 'damping'"),
    ],
)
def test_breaches_of_a_term(found, said):
    module = SimpleNamespace(
        __doc__="A term.", Options=Options, contribute=lambda study, options, outline: found
    )
    with zoo.drawn(zoo.DISC) as (_, study, drawing, _):
        assert said in breach(check_term, module, study, Options(), drawing)


def solver(change) -> SimpleNamespace:
    """LAPACK, its answer then changed."""
    dense = plugins.load("eigensolver", "dense")

    def solve(K, M, count, shift):
        return change(*dense.solve(K, M, count, shift))

    return SimpleNamespace(__doc__="A solver.", solve=solve)


@pytest.mark.parametrize(
    ("change", "said"),
    [
        (lambda values, vectors: (values[:5], vectors), "(6,) values, not (5,)"),
        (lambda values, vectors: (values, vectors.T), "(40, 6) vectors, not (6, 40)"),
        (lambda values, vectors: (values + 1e-6, vectors), "eigenvalues are off by"),
        (lambda values, vectors: (values[::-1], vectors[:, ::-1]), "eigenvalues are off by"),
        (lambda values, vectors: (values, vectors[:, ::-1]), "does not hold"),
        (
            lambda values, vectors: (values, vectors * np.random.default_rng().uniform(1, 2)),
            "other vectors the second time",
        ),
    ],
)
def test_breaches_of_an_eigensolver(change, said):
    assert said in breach(check_eigensolver, solver(change))


def test_breaches_of_a_product(tmp_path):
    spectrum: Any = SimpleNamespace(modes=SimpleNamespace(vectors=np.ones(3)))

    def spoil(spectrum: Any, folder: Any, options: Any) -> None:
        spectrum.modes.vectors[0] = 2.0

    for write, said in ((spoil, "must not change"), (lambda *_: None, "must leave a file")):
        module = SimpleNamespace(__doc__="A product.", Options=Options, write=write)
        assert said in breach(check_product, module, spectrum, tmp_path)
