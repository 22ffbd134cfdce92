"""Studies of bare shapes, for tests of the outline and the kernel."""

from membrane.plugins import load
from membrane.records.study import Head, Hole, Patch, Shape, Study, Tension


def shape(plugin, at=(0.0, 0.0), rotate=0.0, **options):
    return Shape(plugin, load("outline", plugin).Options(**options), at, rotate)


def disc(diameter, x=0.0, y=0.0):
    return shape("disc", (x, y), diameter=diameter)


def box(width, height, x=0.0, y=0.0, rotate=0.0):
    return shape("rectangle", (x, y), rotate, width=width, height=height)


def study(outline, patches=None, holes=None):
    return Study(
        "test",
        outline,
        Head(1.0, Tension.uniform(1.0)),
        tuple(Patch(name, shape, added_density=1.0) for name, shape in (patches or {}).items()),
        tuple(Hole(name, shape) for name, shape in (holes or {}).items()),
    )
